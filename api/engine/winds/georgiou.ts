import { AIR_DENSITY } from '../constants.ts';
import { DomainError } from '../errors.ts';
import type { HollandVortex } from './holland-1980.ts';

/**
 * Gradient wind of a moving Holland vortex: the balance of forces along the path of a parcel, not along a circle.
 *
 * @param r        Distance from the centre [m]; below 1 m taken as 1 m.
 * @param vortex   Its parameters: rMax > 0, b > 0, deficit > 0.
 * @param speed    Translation speed [m s⁻¹], ≥ 0.
 * @param sideSine Sine of the bearing of the place less the heading, times the sign of the hemisphere [1]: 1 on the strong
 *                 side, 0 ahead and behind, -1 on the weak side.
 * @returns Wind above the friction layer [m s⁻¹], ≥ 0. NaN for NaN.
 * @throws {DomainError} when a parameter is outside its range.
 * @source Georgiou (1985), thesis, University of Western Ontario; from memory.
 */
export function georgiouWind(r: number, vortex: HollandVortex, speed: number, sideSine: number): number {
  const { rMax, b, deficit, f } = vortex;
  if (!(rMax > 0)) throw new DomainError('rMax', rMax, '> 0 m');
  if (!(b > 0)) throw new DomainError('b', b, '> 0');
  if (!(deficit > 0)) throw new DomainError('deficit', deficit, '> 0 Pa');
  const distance = r < 1 ? 1 : r;
  const x = (rMax / distance) ** b;
  const half = 0.5 * (speed * sideSine - f * distance);
  return half + Math.sqrt(half * half + ((b * deficit) / AIR_DENSITY) * x * Math.exp(-x));
}
