import type { Fix } from '#contract/scenarios.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { PA_PER_HPA } from '#engine/units.ts';

const pa = (hpa: number | null) => (hpa === null ? null : hpa * PA_PER_HPA);

/** A fix as the engine takes it: pascals, and seconds since 1970. Radii that older tracks don't know are not given. */
export const engineFix = (fix: Fix, windAveragingS: TrackFix['windAveragingS']): TrackFix => ({
  timeS: Date.parse(fix.time) / 1000,
  latitude: fix.latitude,
  longitude: fix.longitude,
  centralPressurePa: pa(fix.centralPressureHpa),
  ambientPressurePa: pa(fix.ambientPressureHpa),
  maxWindMs: fix.maxWindMs,
  windAveragingS,
  radiusOfMaxWindM: fix.radiusOfMaxWindM,
  radius34KtM: fix.radius34KtM ?? null,
  radius50KtM: fix.radius50KtM ?? null,
  radius64KtM: fix.radius64KtM,
  ringWidthFraction: fix.ringWidthFraction,
  eyeVorticityRatio: fix.eyeVorticityRatio,
  hoursInland: fix.hoursInland,
});
