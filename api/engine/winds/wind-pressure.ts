import { PA_PER_HPA, knotsFromMs } from '../units.ts';

/** Relative storm size where the size is unknown [1]. */
const UNKNOWN_SIZE = 1;
/** Latitude that parts the two branches [deg]. They differ by about 6 hPa there; the branch used is named. */
const BRANCH_LATITUDE = 18;

/** A central pressure and the relation that gave it. */
export type PressureEstimate = { readonly pressure: number; readonly relation: string };

/**
 * Central pressure from the maximum wind, for a storm of unknown size.
 *
 * @param maxWind  Maximum 1-min wind [m s⁻¹].
 * @param speed    Translation speed [m s⁻¹], ≥ 0.
 * @param latitude Latitude of the centre [deg].
 * @param ambient  Ambient pressure [Pa].
 * @returns Central pressure [Pa] and the name of the branch.
 * @source Knaff & Zehr (2007), Wea. Forecasting 22, 71–88, from 18 degrees on; Courtney & Knaff (2009), Aust. Meteor.
 *         Oceanogr. J. 58, 167–179, nearer the equator; constants from memory.
 */
export function centralPressure(maxWind: number, speed: number, latitude: number, ambient: number): PressureEstimate {
  const wind = knotsFromMs(maxWind) - 1.5 * knotsFromMs(speed) ** 0.63;
  const away = Math.abs(latitude);
  if (away >= BRANCH_LATITUDE) {
    const rise = 23.286 - 0.483 * wind - (wind / 24.254) ** 2 - 12.587 * UNKNOWN_SIZE - 0.483 * away;
    return { pressure: ambient + rise * PA_PER_HPA, relation: 'Knaff & Zehr (2007), size unknown' };
  }
  const rise = 5.962 - 0.267 * wind - (wind / 18.26) ** 2 - 6.8 * UNKNOWN_SIZE;
  return { pressure: ambient + rise * PA_PER_HPA, relation: 'Courtney & Knaff (2009), size unknown' };
}
