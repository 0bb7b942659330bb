import type { ChainSettings } from '#contract/studies.ts';
import { DEFAULT_OPTIONS, WIND_CHOICE_NAMES, type ChainOptions } from '#engine/track/options.ts';

/** A person's settings as the chain takes them. */
export const chainOptionsOf = ({ intensity, anchor, mesovortices, regime, wind }: ChainSettings): ChainOptions => ({
  ...DEFAULT_OPTIONS,
  ...wind,
  intensity,
  anchor,
  mesovortices,
  regime,
});

/** The other way round: what a person would have set to get these options. */
export const settingsOf = (options: ChainOptions): ChainSettings => {
  const { intensity, anchor, mesovortices, regime } = options;
  const wind = Object.fromEntries(WIND_CHOICE_NAMES.map((name) => [name, options[name]])) as ChainSettings['wind'];
  return { intensity, anchor, mesovortices, regime, wind };
};
