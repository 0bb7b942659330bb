import { DomainError } from '../errors.ts';
import { radians } from '../units.ts';

/** The relation is used up to this many radii of maximum wind [1]; beyond it stays as there. */
const LARGEST_SCALED_RADIUS = 12;

/**
 * Angle by which the surface wind turns inwards.
 *
 * @param x Distance from the centre over the radius of maximum wind [1], ≥ 0.
 * @returns Inflow angle [deg]: 10 at the centre, 20 at the radius of maximum wind, 25 from 1.2 of it on. NaN for NaN.
 * @source Bretschneider (1972) as used by Phadke et al. (2003), Ocean Eng. 30, 553–578; from memory.
 */
export function inflowAngle(x: number): number {
  if (x < 1) return 10 * (1 + x);
  if (x < 1.2) return 20 + 25 * (x - 1);
  return x >= 1.2 ? 25 : NaN;
}

/**
 * Angle by which the surface wind turns inwards, with its asymmetry from the motion of the storm. The sign is turned from
 * the source's, where inflow is negative.
 *
 * @param x          Distance from the centre over the radius of maximum wind [1], ≥ 0; above 12 taken as 12.
 * @param azimuthDeg Bearing of the place less the heading, times the sign of the hemisphere [deg]: 90 on the strong side.
 * @param maxWind    Maximum 1-min wind [m s⁻¹], ≥ 0.
 * @param speed      Translation speed [m s⁻¹], ≥ 0.
 * @returns Inflow angle [deg], relative to the moving storm, positive inwards; beyond 50 in the front on the strong side
 *          of a fast storm far out, and near 0 or outwards in the rear on the weak side. NaN for x or azimuth of NaN.
 * @throws {DomainError} when wind or speed is outside its range.
 * @source Zhang & Uhlhorn (2012), Mon. Wea. Rev. 140, 3587–3605; constants from memory. The sign of the asymmetry is the
 *         one that reproduces the abstract.
 */
export function zhangUhlhornInflow(x: number, azimuthDeg: number, maxWind: number, speed: number): number {
  if (!(maxWind >= 0)) throw new DomainError('maxWind', maxWind, '≥ 0 m/s');
  if (!(speed >= 0)) throw new DomainError('speed', speed, '≥ 0 m/s');
  const scaled = Math.min(x, LARGEST_SCALED_RADIUS);
  const mean = 0.9 * scaled + 0.09 * maxWind + 14.33;
  const amplitude = mean * (0.04 * scaled + 0.05 * speed + 0.14);
  const phase = 6.88 * scaled - 9.6 * speed + 85.31;
  return mean + amplitude * Math.cos(radians(azimuthDeg - phase));
}
