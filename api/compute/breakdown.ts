import { breakdown, type BreakdownFrame, type BreakdownSetup } from '#engine/ring/breakdown.ts';

const NOTHING = new Float32Array(0);

/** Frames of a breakdown, with or without their vorticity; null once it was asked to stop, which it does between frames. */
export const breakdownFrames = (
  setup: BreakdownSetup,
  withVorticity: boolean,
  shouldStop: () => boolean,
): BreakdownFrame[] | null => {
  const frames: BreakdownFrame[] = [];
  for (const frame of breakdown(setup)) {
    if (shouldStop()) return null;
    frames.push(withVorticity ? frame : { ...frame, vorticity: NOTHING });
  }
  return frames;
};
