import type { ChainSettings } from '#contract/studies.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';

/** A person's settings as the chain takes them. */
export const chainOptionsOf = ({ intensity, anchor, mesovortices, wind }: ChainSettings): ChainOptions => ({
  ...DEFAULT_OPTIONS,
  ...wind,
  intensity,
  anchor,
  mesovortices,
});
