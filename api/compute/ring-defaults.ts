import type { TrackFix } from '#engine/track/fixes.ts';

/** A calibration's ring where a fix leaves its own open. */
export const fixesWithRing = (
  fixes: readonly TrackFix[],
  ring: { ringWidthFraction: number; eyeVorticityRatio: number },
): TrackFix[] =>
  fixes.map((fix) => ({
    ...fix,
    ringWidthFraction: fix.ringWidthFraction ?? ring.ringWidthFraction,
    eyeVorticityRatio: fix.eyeVorticityRatio ?? ring.eyeVorticityRatio,
  }));
