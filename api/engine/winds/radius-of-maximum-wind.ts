import { METRES_PER_NAUTICAL_MILE, PA_PER_HPA, knotsFromMs, radians } from '../units.ts';

/** Range in which an estimated radius of maximum wind is used [m]. */
const RADIUS_RANGE = [8_000, 150_000] as const;

/**
 * Radius of maximum wind from pressure deficit and latitude, all hurricanes.
 *
 * @param deficit  Pressure deficit [Pa].
 * @param latitude Latitude of the centre [deg].
 * @returns Radius [m], not clamped; spread of its logarithm 0.441.
 * @source Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; constants from memory.
 */
export function vickeryWadheraRadius(deficit: number, latitude: number): number {
  const hPa = deficit / PA_PER_HPA;
  return 1000 * Math.exp(3.015 - 6.291e-5 * hPa * hPa + 0.0337 * Math.abs(latitude));
}

/**
 * Radius of maximum wind from pressure deficit, hurricanes of the Gulf of Mexico.
 *
 * @param deficit Pressure deficit [Pa].
 * @returns Radius [m], not clamped; spread of its logarithm 0.390.
 * @source Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517; constants from memory.
 */
export function vickeryWadheraGulfRadius(deficit: number): number {
  const hPa = deficit / PA_PER_HPA;
  return 1000 * Math.exp(3.859 - 7.7e-5 * hPa * hPa);
}

/**
 * Radius of maximum wind from maximum wind and latitude, after the earlier of two relations to flight-level winds.
 *
 * @param maxWind  Maximum wind [m s⁻¹].
 * @param latitude Latitude of the centre [deg].
 * @returns Radius [m], not clamped.
 * @source Willoughby & Rahn (2004), Mon. Wea. Rev. 132, 3033–3048; from memory.
 */
export function willoughbyRahnRadius(maxWind: number, latitude: number): number {
  return 51_600 * Math.exp(-0.0223 * maxWind + 0.0281 * Math.abs(latitude));
}

/**
 * Radius of maximum wind from maximum wind and latitude, after the later of two relations to flight-level winds.
 *
 * @param maxWind  Maximum wind at flight level [m s⁻¹].
 * @param latitude Latitude of the centre [deg].
 * @returns Radius [m], not clamped.
 * @source Willoughby, Darling & Rahn (2006), Mon. Wea. Rev. 134, 1102–1120, eq. 7a; from memory.
 */
export function willoughbyRadius(maxWind: number, latitude: number): number {
  return 46_400 * Math.exp(-0.0155 * maxWind + 0.0169 * Math.abs(latitude));
}

/**
 * Radius of maximum wind from maximum wind and latitude, the climatology behind flight-level winds from infrared images.
 *
 * @param maxWind  Maximum 1-min wind [m s⁻¹].
 * @param latitude Latitude of the centre [deg].
 * @returns Radius [m], not clamped.
 * @source Knaff et al. (2015), J. Appl. Meteor. Climatol. 54, 463–478; from memory. 10.9884 circulates for 10.9844; up to
 *         150 kt it changes less than 0.15 nautical miles.
 */
export function knaffRadius(maxWind: number, latitude: number): number {
  const knots = knotsFromMs(maxWind);
  const bend = (knots / 10.9844) ** 2 - (knots / 35.3052) ** 3;
  const miles = 218.3784 - 1.2014 * knots + bend - 145.509 * Math.cos(radians(latitude));
  return miles * METRES_PER_NAUTICAL_MILE;
}

/**
 * Keeps an estimated radius in the range in which it is used.
 *
 * @param radius Radius of maximum wind [m].
 * @returns Radius in 8..150 km [m].
 * @source Product rule.
 */
export function clampedRadius(radius: number): number {
  return Math.min(Math.max(radius, RADIUS_RANGE[0]), RADIUS_RANGE[1]);
}
