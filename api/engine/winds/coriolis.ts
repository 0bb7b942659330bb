import { EARTH_ROTATION } from '../constants.ts';
import { radians } from '../units.ts';

/**
 * Coriolis parameter as a positive magnitude; the hemisphere enters the chain only through its sign.
 *
 * @param latitude Latitude of the centre [deg].
 * @returns 2 Ω sin|latitude| [s⁻¹].
 * @source Definition.
 */
export function coriolis(latitude: number): number {
  return 2 * EARTH_ROTATION * Math.sin(radians(Math.abs(latitude)));
}

/**
 * Sense of rotation of a cyclone at a latitude.
 *
 * @param latitude Latitude of the centre [deg].
 * @returns 1 in the northern hemisphere and on the equator, -1 in the southern [1].
 * @source Convention of this chain.
 */
export function hemisphereSign(latitude: number): 1 | -1 {
  return latitude < 0 ? -1 : 1;
}
