import { GUST_AVERAGING, MEAN_AVERAGING, peakFactor } from '#engine/gust/gust-factor.ts';
import { turbulenceIntensity } from '#engine/gust/turbulence.ts';
import { seaRoughness } from '#engine/terrain/drag.ts';

const REFERENCE_HEIGHT_M = 10;
/** A wind above which the sea's drag no longer rises. */
const STRONG_WIND = 40;

/**
 * A reported gust at 10 m and over 3 s in the same exposure: gust to mean by the peak factor, mean by the logarithmic law,
 * and back to a gust. A height that isn't stated counts as 10 m, an averaging time as 3 s.
 */
export const standardisedGust = (reported: {
  gustMs: number;
  heightM: number | null;
  averagingS: number | null;
  /** Null = at sea. */
  roughnessLengthM: number | null;
}): number => {
  const z0 = reported.roughnessLengthM ?? seaRoughness(STRONG_WIND);
  const height = reported.heightM ?? REFERENCE_HEIGHT_M;
  const gustOverMean = (averagingS: number, metres: number) =>
    1 + peakFactor(averagingS, MEAN_AVERAGING, metres) * turbulenceIntensity(z0, metres);
  const meanThere = reported.gustMs / gustOverMean(reported.averagingS ?? GUST_AVERAGING, height);
  const mean = (meanThere * Math.log(REFERENCE_HEIGHT_M / z0)) / Math.log(height / z0);
  return mean * gustOverMean(GUST_AVERAGING, REFERENCE_HEIGHT_M);
};
