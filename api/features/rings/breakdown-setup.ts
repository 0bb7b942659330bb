import type { BreakdownRequest } from '#contract/rings.ts';
import { DEFAULT_BREAKDOWN, type BreakdownSetup } from '#engine/ring/breakdown.ts';
import type { Fault } from '#contract/errors.ts';

const MOST_FRAMES = 400;
/** With their vorticity, frames are sent for pictures: more of them, or finer ones, make a reply of tens of megabytes. */
const MOST_PICTURES = 25;
const MOST_PICTURE_POINTS = 128;
/** Grid points times steps: about 10 s of one thread. */
const MOST_WORK = 1.2e8;
const SECONDS_PER_HOUR = 3600;

/** A request as the engine takes it. */
export const setupOf = (request: BreakdownRequest): BreakdownSetup => ({
  maxWind: request.maxWindMs,
  radiusOfMaxWind: request.radiusOfMaxWindM,
  widthFraction: request.ringWidthFraction,
  eyeRatio: request.eyeVorticityRatio,
  points: request.points,
  sideInRadii: DEFAULT_BREAKDOWN.sideInRadii,
  durationS: request.durationS,
  frameStepS: request.frameStepS,
  disturbance: request.disturbance,
  seed: request.seed,
  relaxationS: request.relaxationS,
});

/** Grid points times steps for each second of the storm: the time step follows the grid and the wind. */
const workPerS = ({ points, radiusOfMaxWindM, maxWindMs }: BreakdownRequest): number => {
  const shortestWave = (2 * Math.PI * (points / 3)) / (DEFAULT_BREAKDOWN.sideInRadii * radiusOfMaxWindM);
  return (points * points * shortestWave * maxWindMs) / 2;
};

/** Why a breakdown isn’t computed at once for the caller, each with its quantity, value and range. */
export const breakdownFaults = (request: BreakdownRequest): Fault[] => {
  const { durationS, frameStepS, points, frames } = request;
  const count = Math.ceil(durationS / frameStepS) + 1;
  const faults: Fault[] = [];
  if (count > MOST_FRAMES + 1) {
    faults.push({
      path: 'body.frameStepS',
      message: `The time between frames is ${frameStepS} s: ${count} frames. Give ${Math.ceil(durationS / MOST_FRAMES)} s or more for ${durationS} s.`,
    });
  }
  if (frames && (count > MOST_PICTURES || points > MOST_PICTURE_POINTS)) {
    faults.push({
      path: 'body.frames',
      message: `Vorticity was asked for in ${count} frames of ${points} points. Give at most ${MOST_PICTURES} frames of at most ${MOST_PICTURE_POINTS} points, or leave the vorticity out.`,
    });
  }
  if (durationS * workPerS(request) > MOST_WORK) {
    const hours = Math.floor((10 * MOST_WORK) / workPerS(request) / SECONDS_PER_HOUR) / 10;
    faults.push({
      path: 'body.durationS',
      message: `The duration is ${durationS} s at ${points} points. Give at most ${Math.round(hours * SECONDS_PER_HOUR)} s for this ring at that resolution.`,
    });
  }
  return faults;
};
