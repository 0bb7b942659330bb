import type { ComparedSettings } from '#contract/validation.ts';
import type { ChainOptions } from '#engine/track/options.ts';

type Setting = { key: ComparedSettings; title: string; meaning: string; options: Partial<ChainOptions> };

/** Settings the observations are compared with; the first is the default. Nothing is fitted in any of them. */
export const SETTINGS: readonly Setting[] = [
  {
    key: 'default',
    title: 'Pressure (default)',
    meaning: 'The central pressure sets the intensity; a missing radius of maximum wind comes from the 64-kt radii.',
    options: {},
  },
  {
    key: 'relation-width',
    title: 'Pressure, width by relation',
    meaning:
      'As the default, but a missing radius of maximum wind comes from pressure and latitude; radii are not used.',
    options: { radiusSource: 'relation' },
  },
  {
    key: 'wind',
    title: 'Wind',
    meaning: 'The reported maximum wind sets the intensity, and is taken to hold vortex peaks already.',
    options: { intensity: 'wind' },
  },
  {
    key: 'wind-as-mean',
    title: 'Wind, as the ring’s mean',
    meaning: 'The reported maximum wind is taken as the maximum all round the ring.',
    options: { intensity: 'wind', anchor: 'mean' },
  },
];
