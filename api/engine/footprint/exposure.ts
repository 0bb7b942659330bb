import { DomainError } from '../errors.ts';
import { GUST_AVERAGING, MEAN_AVERAGING, peakFactor } from '../gust/gust-factor.ts';
import { turbulenceIntensity } from '../gust/turbulence.ts';
import { fetchWeight, SECTOR_COUNT } from '../terrain/fetch.ts';
import { roughnessFactor } from '../terrain/roughness.ts';

/** Standard deviations by which a 3-s gust exceeds the 10-min mean at 10 m [1]. */
export const PEAK_FACTOR = peakFactor(GUST_AVERAGING, MEAN_AVERAGING);

/** What the ground around a site does to the wind. */
export type Exposure = {
  readonly isAtSea: boolean;
  /** Roughness length of the land [m]; NaN at sea. */
  readonly roughnessM: number;
  /** Weight of the land for wind FROM 0, 45, ..., 315 degrees [1], shape (8,); rewritten by setExposure. */
  readonly weights: Float64Array;
  /** True when all weights are equal, so that the direction does not matter. */
  readonly isUniform: boolean;
  /** Roughness factor cr of the land at 10 m [1]. */
  readonly landFactor: number;
  /** Turbulence intensity over the land at 10 m [1]. */
  readonly landTurbulence: number;
  readonly topographicFactor: number;
};

/**
 * Works out what does not depend on the wind.
 *
 * @param site              Name of the site for messages.
 * @param roughness         Roughness length [m], 0 < z0 < 10; NaN = at sea.
 * @param fetch             Overland distances, wind FROM 0, 45, ..., 315 degrees [m], eight from `first` on.
 * @param first             Index of the first of them.
 * @param topographicFactor Speed-up of the gust by a hill [1], > 0.
 * @param weights           Receives the weights, shape (8,).
 * @returns The exposure, holding `weights`.
 * @throws {DomainError} naming the site when a value is outside its range.
 * @source terrain/fetch.ts, terrain/roughness.ts, gust/turbulence.ts.
 */
export function exposureOf(
  site: string,
  roughness: number,
  fetch: ArrayLike<number>,
  first: number,
  topographicFactor: number,
  weights: Float64Array,
): Exposure {
  if (!(topographicFactor > 0 && topographicFactor < Infinity)) {
    throw new DomainError(`topographic factor of ${site}`, topographicFactor, 'above 0');
  }
  if (Number.isNaN(roughness)) {
    weights.fill(0);
    return {
      isAtSea: true,
      roughnessM: NaN,
      weights,
      isUniform: true,
      landFactor: 1,
      landTurbulence: 0,
      topographicFactor,
    };
  }
  if (!(roughness > 0 && roughness < 10)) {
    throw new DomainError(`roughness length of ${site}`, roughness, 'in (0, 10) m');
  }
  let isUniform = true;
  for (let k = 0; k < SECTOR_COUNT; k++) {
    const metres = fetch[first + k]!;
    if (!(metres >= 0)) throw new DomainError(`fetch ${k + 1} of ${site}`, metres, '0 m or more');
    weights[k] = fetchWeight(metres, roughness);
    if (weights[k] !== weights[0]) isUniform = false;
  }
  return {
    isAtSea: false,
    roughnessM: roughness,
    weights,
    isUniform,
    landFactor: roughnessFactor(roughness),
    landTurbulence: turbulenceIntensity(roughness),
    topographicFactor,
  };
}
