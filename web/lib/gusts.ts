import { decimal, range } from './numbers.ts';
import { fromMetresPerSecond, type WindUnit } from './wind-units.ts';

/** One decimal in every unit: "50.0", "111.8", "180.0", "97.2". */
export const gustText = (speedMs: number, unit: WindUnit): string => decimal(fromMetresPerSecond(speedMs, unit), 1);
/** "58.3–60.4"; both ends are rounded before they are compared, so no range reads "58.3–58.3". */
export const gustRangeText = (lowMs: number, highMs: number, unit: WindUnit): string =>
  range(gustText(lowMs, unit), gustText(highMs, unit));
