import { AIR_DENSITY } from '../constants.ts';
import { DomainError } from '../errors.ts';
import { PA_PER_HPA } from '../units.ts';

/** Range in which the shape parameter is used [1]. */
const B_RANGE = [0.8, 2.5] as const;

const DRY_AIR = 287;
const SEA_TEMPERATURE = 300.15;
const METRES_PER_KM = 1000;
const SECONDS_PER_HOUR = 3600;
/** Pressure deficit from which the exponent of the translation speed in Holland (2008) is no longer positive [hPa]. */
const DEFICIT_LIMIT_HPA = 215;

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
 * Shape parameter from size and latitude.
 *
 * @param rMax     Radius of maximum wind [m].
 * @param latitude Latitude of the centre [deg].
 * @returns B [1], not clamped; spread 0.286.
 * @source Powell et al. (2005), J. Wind Eng. Ind. Aerodyn. 93, 651–674; from memory.
 */
export function powellB(rMax: number, latitude: number): number {
  return 1.881 - (0.00557 * rMax) / METRES_PER_KM - 0.01295 * Math.abs(latitude);
}

/**
 * Shape parameter of the wind at the SURFACE. The maximum 1-min 10-m wind is √(bs deficit / (ρ e)), with no surface factor
 * on it: the parameter of the gradient wind is this one over the square of that factor, and using both counts the
 * friction the wrong way round.
 *
 * @param deficit         Pressure deficit [Pa], more than 0 and less than 21 500.
 * @param tendencyPaPerS  Rate of change of the central pressure [Pa s⁻¹], negative while the storm deepens.
 * @param latitude        Latitude of the centre [deg].
 * @param speed           Translation speed [m s⁻¹], ≥ 0.
 * @returns bs [1], not clamped.
 * @throws {DomainError} when deficit or speed is outside its range.
 * @source Holland (2008), Mon. Wea. Rev. 136, 3432–3445; from memory.
 */
export function hollandSurfaceB(deficit: number, tendencyPaPerS: number, latitude: number, speed: number): number {
  const hPa = deficit / PA_PER_HPA;
  if (!(hPa > 0 && hPa < DEFICIT_LIMIT_HPA)) throw new DomainError('deficit', deficit, 'in 0..21500 Pa');
  if (!(speed >= 0)) throw new DomainError('speed', speed, '≥ 0 m/s');
  const hPaPerHour = (tendencyPaPerS * SECONDS_PER_HOUR) / PA_PER_HPA;
  const motion = 0.15 * speed ** (0.6 * (1 - hPa / DEFICIT_LIMIT_HPA));
  return -4.4e-5 * hPa * hPa + 0.01 * hPa + 0.03 * hPaPerHour - 0.014 * Math.abs(latitude) + motion + 1;
}

/**
 * Shape parameter from the maximum wind, size and latitude, fitted to whole flight-level profiles.
 *
 * @param maxWind  Maximum wind at flight level [m s⁻¹].
 * @param rMax     Radius of maximum wind [m], > 0.
 * @param latitude Latitude of the centre [deg].
 * @returns B [1], not clamped; a measure of the profile's shape, high as one of its peak.
 * @source Willoughby & Rahn (2004), Mon. Wea. Rev. 132, 3033–3048; from memory.
 */
export function willoughbyRahnB(maxWind: number, rMax: number, latitude: number): number {
  return 1.0036 + 0.0173 * maxWind - 0.0313 * Math.log(rMax / METRES_PER_KM) + 0.0087 * Math.abs(latitude);
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
