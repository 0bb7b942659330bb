import { DomainError } from '../errors.ts';
import { METRES_PER_NAUTICAL_MILE, PA_PER_HPA, knotsFromMs, msFromKnots } from '../units.ts';

/** Relative storm size where the size is unknown [1]. */
const UNKNOWN_SIZE = 1;
/** Latitude that parts the two branches [deg]. They differ by about 6 hPa there; the branch used is named. */
const BRANCH_LATITUDE = 18;

/** A central pressure and the relation that gave it. */
export type PressureEstimate = { readonly pressure: number; readonly relation: string };

/** Least relative storm size [1]. */
const LEAST_SIZE = 0.4;
/** Ambient pressure of Atkinson & Holliday (1977) [hPa], and their factor and exponent. */
const PACIFIC_AMBIENT_HPA = 1010;
const PACIFIC_FACTOR = 6.7;
const PACIFIC_EXPONENT = 0.644;

/**
 * Central pressure from the maximum wind.
 *
 * @param maxWind  Maximum 1-min wind [m s⁻¹].
 * @param speed    Translation speed [m s⁻¹], ≥ 0.
 * @param latitude Latitude of the centre [deg].
 * @param ambient  Ambient pressure [Pa].
 * @param size     Relative size of the storm [1], see `relativeSize`; left out where it is unknown.
 * @returns Central pressure [Pa] and the name of the branch.
 * @source Knaff & Zehr (2007), Wea. Forecasting 22, 71–88, from 18 degrees on; Courtney & Knaff (2009), Aust. Meteor.
 *         Oceanogr. J. 58, 167–179, nearer the equator; constants from memory.
 */
export function centralPressure(
  maxWind: number,
  speed: number,
  latitude: number,
  ambient: number,
  size?: number,
): PressureEstimate {
  const s = size ?? UNKNOWN_SIZE;
  const known = size === undefined ? 'size unknown' : `relative size ${size.toFixed(2)}`;
  const wind = knotsFromMs(maxWind) - 1.5 * knotsFromMs(speed) ** 0.63;
  const away = Math.abs(latitude);
  if (away >= BRANCH_LATITUDE) {
    const rise = 23.286 - 0.483 * wind - (wind / 24.254) ** 2 - 12.587 * s - 0.483 * away;
    return { pressure: ambient + rise * PA_PER_HPA, relation: `Knaff & Zehr (2007), ${known}` };
  }
  const rise = 5.962 - 0.267 * wind - (wind / 18.26) ** 2 - 6.8 * s;
  return { pressure: ambient + rise * PA_PER_HPA, relation: `Courtney & Knaff (2009), ${known}` };
}

/**
 * Size of a storm relative to the usual one of its strength and latitude, by the wind 500 km from its centre.
 *
 * @param maxWind  Maximum 1-min wind [m s⁻¹], > 0.
 * @param latitude Latitude of the centre [deg].
 * @param wind500  1-min wind 500 km from the centre [m s⁻¹], see `windAt500Km`.
 * @returns Relative size [1], at least 0.4.
 * @source Knaff & Zehr (2007), Wea. Forecasting 22, 71–88; constants from memory.
 */
export function relativeSize(maxWind: number, latitude: number, wind500: number): number {
  const knots = knotsFromMs(maxWind);
  const away = Math.abs(latitude) - 25;
  const exponent = 0.1147 + 0.0055 * knots - 0.001 * away;
  const radiusKm = 66.785 - 0.09102 * knots + 1.0619 * away;
  return Math.max(LEAST_SIZE, wind500 / (maxWind * (radiusKm / 500) ** exponent));
}

/**
 * Wind 500 km from the centre, by the reach of the 34-kt wind.
 *
 * @param reach Mean radius of 34-kt wind [m].
 * @returns 1-min wind [m s⁻¹]; negative below 27 nautical miles, where the relation says nothing.
 * @source Courtney & Knaff (2009), Aust. Meteor. Oceanogr. J. 58, 167–179; from memory.
 */
export function windAt500Km(reach: number): number {
  return msFromKnots(reach / METRES_PER_NAUTICAL_MILE / 9 - 3);
}

/**
 * Maximum wind from the central pressure, western North Pacific.
 *
 * @param central Central pressure [Pa].
 * @returns Maximum 1-min wind [m s⁻¹]; 0 from 1010 hPa on. NaN for NaN.
 * @source Atkinson & Holliday (1977), Mon. Wea. Rev. 105, 421–427; from memory.
 */
export function atkinsonHollidayWind(central: number): number {
  const hPa = PACIFIC_AMBIENT_HPA - central / PA_PER_HPA;
  return hPa <= 0 ? 0 : msFromKnots(PACIFIC_FACTOR * hPa ** PACIFIC_EXPONENT);
}

/**
 * Central pressure from the maximum wind, western North Pacific.
 *
 * @param maxWind Maximum 1-min wind [m s⁻¹], ≥ 0.
 * @returns Central pressure [Pa], at most 101 000; the ambient pressure of the relation is 1010 hPa whatever the storm's.
 * @throws {DomainError} when the wind is negative or not a number.
 * @source Atkinson & Holliday (1977), Mon. Wea. Rev. 105, 421–427, solved for the pressure; from memory.
 */
export function atkinsonHollidayPressure(maxWind: number): number {
  if (!(maxWind >= 0)) throw new DomainError('maxWind', maxWind, '≥ 0 m/s');
  const hPa = (knotsFromMs(maxWind) / PACIFIC_FACTOR) ** (1 / PACIFIC_EXPONENT);
  return (PACIFIC_AMBIENT_HPA - hPa) * PA_PER_HPA;
}
