import { CHANCE_TOKENS, DIFFERENCE_TOKENS, GUST_TOKENS } from '../charts/gust-scale.ts';

const NAMES = [
  '--map-sea',
  '--map-land',
  '--map-coast',
  '--map-graticule',
  '--map-track',
  '--map-halo',
  '--p-ink',
  '--p-porcelain',
  '--p-pale-brass',
  '--caution',
  '--action',
  '--ink',
  ...GUST_TOKENS,
  ...DIFFERENCE_TOKENS,
  ...CHANCE_TOKENS,
];

/** The colours of the present theme as the map engine wants them: the very values the legend uses. */
export type MapTokens = (name: string) => string;

export const readTokens = (): MapTokens => {
  const style = getComputedStyle(document.documentElement);
  const values = new Map(NAMES.map((name) => [name, style.getPropertyValue(name).trim()]));
  return (name) => values.get(name) ?? '';
};
