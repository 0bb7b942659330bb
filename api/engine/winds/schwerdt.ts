import { DomainError } from '../errors.ts';
import { knotsFromMs, msFromKnots, radians } from '../units.ts';

/**
 * Speed that the motion of the storm adds to the 1-min wind of a symmetric vortex.
 *
 * @param speed    Translation speed [m s⁻¹], ≥ 0.
 * @param angleDeg Angle between the heading and the bearing TOWARDS which the wind blows [deg], of either sign.
 * @returns Addition to the 1-min wind [m s⁻¹], negative where the wind blows against the motion. NaN for an angle of NaN.
 * @throws {DomainError} when the translation speed is negative or not a number.
 * @source Schwerdt, Ho & Watkins (1979), NOAA Tech. Rep. NWS 23: 1.5 c^0.63 cos of the angle, in knots; from memory.
 */
export function schwerdtAddition(speed: number, angleDeg: number): number {
  if (!(speed >= 0)) throw new DomainError('speed', speed, '≥ 0 m/s');
  return msFromKnots(1.5 * knotsFromMs(speed) ** 0.63) * Math.cos(radians(angleDeg));
}
