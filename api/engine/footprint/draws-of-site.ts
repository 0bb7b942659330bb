import { DRAW_COUNT, PHASE_COUNT, startingPhase } from '../ring/draws.ts';
import type { Passage } from './passage.ts';

const HALF = PHASE_COUNT / 2;
const SEED_STRIDE = 5;
const START_COS = Float64Array.from({ length: HALF }, (_, j) => Math.cos(startingPhase(j)));
const START_SIN = Float64Array.from({ length: HALF }, (_, j) => Math.sin(startingPhase(j)));

/** What the draws need of a passage. */
export type DrawnPassage = Pick<Passage, 'gust' | 'crest' | 'phaseCos' | 'phaseSin' | 'ownPhases' | 'strengths'>;

/** Working arrays for the peaks of all draws; made once, used for many sites. */
export type DrawWork = {
  /** Times inside the layer, as indices into the passage. */
  readonly inside: Int32Array;
  /** Per phase, value at the weakest and the strongest node of the line that dominates most so far [m s⁻¹]. */
  readonly low: Float64Array;
  readonly high: Float64Array;
  /** Smallest of each: a line below both of them at its ends changes no draw. */
  leastLow: number;
  leastHigh: number;
};

/**
 * Makes the working arrays.
 *
 * @param stateCount Number of states of the storm.
 * @returns The arrays.
 * @source Workspace only.
 */
export function makeDrawWork(stateCount: number): DrawWork {
  return {
    inside: new Int32Array(stateCount),
    low: new Float64Array(PHASE_COUNT),
    high: new Float64Array(PHASE_COUNT),
    leastLow: 0,
    leastHigh: 0,
  };
}

/**
 * Peak gust of a site in every draw.
 *
 * At a fixed time and phase the gust is a straight line in the strength of the draw. Times are taken outward from the
 * highest plain gust, and a line that lies below one already seen at both ends of the strengths is skipped.
 *
 * @param passage Series of the site from followPassage.
 * @param count   Number of times in it.
 * @param peak    Index of the highest plain gust in it.
 * @param work    Working arrays.
 * @param gusts   Receives the peak per draw [m s⁻¹], shape (264,); draw = 24 times node + phase.
 * @returns False when the layer never touches the site: every draw then equals the plain peak, bit for bit.
 * @source Largest of max(0, F (U + a A v E C / 1.05)) over time, term by term.
 */
export function drawPeaks(
  passage: DrawnPassage,
  count: number,
  peak: number,
  work: DrawWork,
  gusts: Float64Array,
): boolean {
  const { gust, crest } = passage;
  const { inside, low, high } = work;
  let insideCount = 0;
  let firstAfterPeak = 0;
  // Times without a vortex are one level line for every phase.
  let level = 0;
  for (let i = 0; i < count; i++) {
    if (crest[i]! > 0) {
      if (i < peak) firstAfterPeak = insideCount + 1;
      inside[insideCount++] = i;
    } else if (gust[i]! > level) level = gust[i]!;
  }
  if (insideCount === 0) {
    gusts.fill(gust[peak]!);
    return false;
  }
  gusts.fill(level);
  low.fill(level);
  high.fill(level);
  work.leastLow = level;
  work.leastHigh = level;
  // A few times well apart first: each meets the pattern at another phase, and together they rule out most others.
  takeOutward(passage, firstAfterPeak, insideCount, SEED_STRIDE, work, gusts);
  takeOutward(passage, firstAfterPeak, insideCount, 1, work, gusts);
  return true;
}

/** Takes every so many of the times inside the layer, outward from the highest plain gust. */
function takeOutward(
  { gust, crest, phaseCos, phaseSin, ownPhases, strengths }: DrawnPassage,
  firstAfterPeak: number,
  insideCount: number,
  stride: number,
  work: DrawWork,
  gusts: Float64Array,
): void {
  const { inside, low, high } = work;
  const weakest = strengths[0]!;
  const strongest = strengths[strengths.length - 1]!;
  let { leastLow, leastHigh } = work;
  let before = firstAfterPeak - stride;
  let after = firstAfterPeak;
  while (before >= 0 || after < insideCount) {
    let i: number;
    if (before < 0 || (after < insideCount && gust[inside[after]!]! >= gust[inside[before]!]!)) {
      i = inside[after]!;
      after += stride;
    } else {
      i = inside[before]!;
      before -= stride;
    }
    const g = gust[i]!;
    const p = crest[i]!;
    // No phase can gain more than the crest itself.
    if (g + weakest * p <= leastLow && g + strongest * p <= leastHigh) continue;
    const scale = p / 1.5;
    const cosNow = phaseCos[i]!;
    const sinNow = phaseSin[i]!;
    let changed = false;
    if (ownPhases !== null) {
      for (let j = 0; j < PHASE_COUNT; j++) {
        const c = cosNow * ownPhases[2 * j]! + sinNow * ownPhases[2 * j + 1]!;
        const slope = scale * (c * c - 0.5 + c);
        if (g + weakest * slope > low[j]! || g + strongest * slope > high[j]!) {
          raise(gusts, strengths, j, g, slope, low, high);
          changed = true;
        }
      }
    }
    for (let j = ownPhases === null ? 0 : HALF; j < HALF; j++) {
      // Phases j and j + 12 are opposite: the cosine changes its sign.
      const c = cosNow * START_COS[j]! + sinNow * START_SIN[j]!;
      const even = scale * (c * c - 0.5);
      const odd = scale * c;
      const slope = even + odd;
      if (g + weakest * slope > low[j]! || g + strongest * slope > high[j]!) {
        raise(gusts, strengths, j, g, slope, low, high);
        changed = true;
      }
      const opposite = even - odd;
      if (g + weakest * opposite > low[j + HALF]! || g + strongest * opposite > high[j + HALF]!) {
        raise(gusts, strengths, j + HALF, g, opposite, low, high);
        changed = true;
      }
    }
    if (!changed) continue;
    leastLow = Infinity;
    leastHigh = Infinity;
    for (let j = 0; j < PHASE_COUNT; j++) {
      if (low[j]! < leastLow) leastLow = low[j]!;
      if (high[j]! < leastHigh) leastHigh = high[j]!;
    }
  }
  work.leastLow = leastLow;
  work.leastHigh = leastHigh;
}

/** Lets one line compete at every node of its phase, and makes it the reference when it is higher on the whole. */
function raise(
  gusts: Float64Array,
  strengths: Float64Array,
  phase: number,
  g: number,
  slope: number,
  low: Float64Array,
  high: Float64Array,
): void {
  for (let n = 0, d = phase; d < DRAW_COUNT; n++, d += PHASE_COUNT) {
    const value = g + strengths[n]! * slope;
    if (value > gusts[d]!) gusts[d] = value;
  }
  const atWeakest = g + strengths[0]! * slope;
  const atStrongest = g + strengths[strengths.length - 1]! * slope;
  if (atWeakest + atStrongest > low[phase]! + high[phase]!) {
    low[phase] = atWeakest;
    high[phase] = atStrongest;
  }
}
