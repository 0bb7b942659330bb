import { DomainError } from '../errors.ts';
import { GUST_AVERAGING, MEAN_AVERAGING, peakFactor } from '../gust/gust-factor.ts';
import { turbulenceIntensity } from '../gust/turbulence.ts';
import { heightRatio, roughnessFactor } from '../terrain/roughness.ts';

/** Roughness length of open terrain [m]. */
export const OPEN_ROUGHNESS = 0.03;

/** A wind as a station reports it. */
export type StationWind = {
  /** Its speed [m s⁻¹], ≥ 0. */
  readonly wind: number;
  /** Height of the anemometer above ground [m]. */
  readonly height: number;
  /** Roughness length around the station, upwind [m]. */
  readonly roughness: number;
  /** Averaging time of the peak within 10 min [s], 1..600; null when the wind is a 10-min mean. */
  readonly peakAveraging: number | null;
};

/**
 * A station's wind as the 10-min mean at 10 m in the station's own exposure: a peak to the mean by the gust factor at the
 * height of the anemometer, then to 10 m by the logarithmic law.
 *
 * @param station The wind, its height, surroundings and averaging time.
 * @returns 10-min mean at 10 m [m s⁻¹].
 * @throws {DomainError} when wind, height, roughness or averaging time is outside its range.
 * @source Logarithmic wind profile; gust factor of `peakFactor` and `turbulenceIntensity`.
 */
export function standardiseExposed(station: StationWind): number {
  const { wind, height, roughness, peakAveraging } = station;
  if (!(wind >= 0)) throw new DomainError('wind', wind, '≥ 0 m/s');
  const factor = peakAveraging === null ? 1 : gustFactor(peakAveraging, roughness, height);
  return (wind / factor) * heightRatio(roughness, height);
}

/**
 * A station's wind as the 10-min mean at 10 m that open terrain (roughness 0.03 m) would have had in its place.
 *
 * @param station The wind, its height, surroundings and averaging time.
 * @returns 10-min mean at 10 m over open terrain [m s⁻¹].
 * @throws {DomainError} when wind, height, roughness or averaging time is outside its range.
 * @source Terrain: ratio of the roughness factors of EN 1991-1-4:2005, eq. 4.4.
 */
export function standardiseMean(station: StationWind): number {
  return (standardiseExposed(station) * roughnessFactor(OPEN_ROUGHNESS)) / roughnessFactor(station.roughness);
}

/**
 * A station's wind as the 3-s gust at 10 m in the station's own exposure.
 *
 * @param station The wind, its height, surroundings and averaging time.
 * @returns 3-s gust within 10 min at 10 m [m s⁻¹].
 * @throws {DomainError} when wind, height, roughness or averaging time is outside its range.
 * @source As `standardiseExposed`, and the same gust factor at 10 m.
 */
export function standardiseGust(station: StationWind): number {
  return standardiseExposed(station) * gustFactor(GUST_AVERAGING, station.roughness);
}

function gustFactor(averaging: number, roughness: number, height?: number): number {
  return 1 + peakFactor(averaging, MEAN_AVERAGING, height) * turbulenceIntensity(roughness, height);
}
