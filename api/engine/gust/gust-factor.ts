import { REFERENCE_HEIGHT } from '../constants.ts';
import { DomainError } from '../errors.ts';

/** Averaging time of a gust [s]. */
export const GUST_AVERAGING = 3;
/** Averaging time of a mean wind [s]. */
export const MEAN_AVERAGING = 600;

/**
 * Number of standard deviations by which the highest short mean within a longer period exceeds the mean of that period.
 *
 * @param short  Averaging time of the peak [s], 1..600.
 * @param period Period in which the peak is looked for and over which the mean is taken [s], ≥ 60.
 * @param height Height above ground [m], > 0.
 * @returns Peak factor g [1]; the gust factor is 1 + g times the turbulence intensity.
 * @throws {DomainError} when a time is outside its range.
 * @source ESDU 83045 as in Harper, Kepert & Ginger (2010), WMO/TD-1555, appendix, and Vickery & Skerlj (2005), J. Struct.
 *         Eng. 131, 825–832; constants from memory.
 */
export function peakFactor(short: number, period: number, height = REFERENCE_HEIGHT): number {
  if (!(short >= 1 && short <= 600)) throw new DomainError('averaging time', short, 'in 1..600 s');
  if (!(period >= 60)) throw new DomainError('period', period, '≥ 60 s');
  if (!(height > 0)) throw new DomainError('height', height, '> 0 m');
  const scale = 3.12 * height ** 0.2;
  const rate = (0.007 + 0.213 * (scale / short) ** 0.654) / scale;
  const y = Math.sqrt(2 * Math.log(period * rate));
  return (y + 0.577 / y) * (1 - 0.193 * (scale / short + 0.1) ** -0.68);
}
