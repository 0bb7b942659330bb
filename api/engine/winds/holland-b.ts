import { AIR_DENSITY } from '../constants.ts';

/** Range in which the shape parameter is used [1]. */
const B_RANGE = [0.8, 2.5] as const;

const DRY_AIR = 287;
const SEA_TEMPERATURE = 300.15;

/**
 * Shape parameter from size, latitude and pressure.
 *
 * @param rMax    Radius of maximum wind [m].
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param deficit Pressure deficit [Pa], > 0.
 * @param central Central pressure [Pa], > 0.
 * @returns B [1], not clamped; spread 0.226.
 * @source Vickery & Wadhera (2008), J. Appl. Meteor. Climatol. 47, 2497–2517, eq. 23; constants from memory.
 */
export function vickeryWadheraB(rMax: number, f: number, deficit: number, central: number): number {
  const energy = 2 * DRY_AIR * SEA_TEMPERATURE * Math.log(1 + deficit / (central * Math.E));
  return 1.7642 - 1.2098 * Math.sqrt((rMax * f) / Math.sqrt(energy));
}

/**
 * Shape parameter with which the Holland profile has a given gradient wind at the radius of maximum wind.
 *
 * @param wind    Gradient wind at that radius [m s⁻¹].
 * @param rMax    Radius of maximum wind [m].
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param deficit Pressure deficit [Pa], > 0.
 * @returns B [1], not clamped.
 * @source Holland (1980) profile solved for B at r = rMax, where x = 1.
 */
export function fittedB(wind: number, rMax: number, f: number, deficit: number): number {
  return ((wind * wind + wind * f * rMax) * AIR_DENSITY * Math.E) / deficit;
}

/**
 * Keeps a shape parameter in the range in which it is used.
 *
 * @param b Shape parameter [1].
 * @returns B in 0.8..2.5 [1].
 * @source Range of validity of the Holland profile; product rule.
 */
export function clampedB(b: number): number {
  return Math.min(Math.max(b, B_RANGE[0]), B_RANGE[1]);
}
