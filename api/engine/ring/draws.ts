import { DomainError } from '../errors.ts';

/** Vortex strength factors a (regime times individual strength) [1]. Judgement, checked on barotropic runs. */
export const AMPLITUDE_NODES = [0.2, 0.28, 0.34, 0.39, 0.49, 0.56, 0.64, 0.73, 0.83, 0.935, 1.1] as const;
/** Weights of the strength factors in thousandths, so that cumulative weights of draws are exact whole numbers. */
const NODE_THOUSANDTHS = [150, 300, 225, 105, 30, 50, 45, 35, 20, 30, 10] as const;
/** Weights of the strength factors [1]; they sum to 1. */
export const AMPLITUDE_WEIGHTS: readonly number[] = NODE_THOUSANDTHS.map((t) => t / 1000);
/** Weighted mean of the strength factors [1]. */
export const MEAN_AMPLITUDE = 0.38415;
/** Number of starting phases per strength factor. */
export const PHASE_COUNT = 24;
/** Number of draws: draw d has strength node floor(d / 24) and phase d mod 24. */
export const DRAW_COUNT = AMPLITUDE_NODES.length * PHASE_COUNT;
/** Whole-number weight of each draw; they sum to DRAW_WEIGHT_TOTAL. */
export const DRAW_WEIGHT_UNITS: readonly number[] = Array.from(
  { length: DRAW_COUNT },
  (_, d) => NODE_THOUSANDTHS[Math.floor(d / PHASE_COUNT)]!,
);
/** Sum of DRAW_WEIGHT_UNITS. */
export const DRAW_WEIGHT_TOTAL = 1000 * PHASE_COUNT;

/**
 * Starting phase of a draw.
 *
 * @param j Phase number [1], 0..23.
 * @returns 2 pi (j + 0.5) / 24 [rad].
 * @source Midpoint rule over one wavelength.
 */
export function startingPhase(j: number): number {
  return (2 * Math.PI * (j + 0.5)) / PHASE_COUNT;
}

const SHAPE_X = [0, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.1, 1.2, 1.3, 1.4, 1.5, 1.7, 2] as const;
const SHAPE_E = [0, 0.56, 0.73, 0.85, 1.03, 1.15, 1.25, 1.1, 1, 0.87, 0.7, 0.5, 0.35, 0.26, 0.17, 0] as const;
/** Distance beyond which the vortex wind is nil, in radii of maximum wind [1]. */
export const VORTEX_REACH = 2;

/**
 * Radial shape of the vortex wind: piecewise linear, 1 at the radius of maximum wind, 0 at the centre and beyond 2.
 *
 * @param x Distance from the centre over the radius of maximum wind [1], ≥ 0.
 * @returns Shape factor [1]. NaN for NaN.
 * @source Median 99th-percentile speed anomaly of own barotropic runs.
 */
export function radialShape(x: number): number {
  if (x >= VORTEX_REACH) return 0;
  let i = 1;
  while (x > SHAPE_X[i]!) i++;
  const lo = SHAPE_X[i - 1]!;
  const from = SHAPE_E[i - 1]!;
  return from + ((SHAPE_E[i]! - from) * (x - lo)) / (SHAPE_X[i]! - lo);
}

/**
 * Azimuthal shape of the vortex wind: maximum 1 at 0, minimum -0.5, zero mean.
 *
 * @param x Phase [rad].
 * @returns (cos x + cos(2x) / 2) / 1.5 [1].
 * @source Fitted to own barotropic runs.
 */
export function azimuthalShape(x: number): number {
  const c = Math.cos(x);
  return (c + c * c - 0.5) / 1.5;
}

/**
 * Weighted mean over the draws.
 *
 * @param values One value per draw, shape (264,).
 * @returns The mean, in the unit of the values.
 * @throws {DomainError} when the number of values is not DRAW_COUNT.
 * @source Weights of the condensed strength distribution; judgement.
 */
export function drawMean(values: ArrayLike<number>): number {
  requireDraws(values);
  let sum = 0;
  for (let i = 0; i < AMPLITUDE_NODES.length; i++) {
    let part = 0;
    const first = i * PHASE_COUNT;
    for (let j = 0; j < PHASE_COUNT; j++) part += values[first + j]!;
    sum += NODE_THOUSANDTHS[i]! * part;
  }
  return sum / DRAW_WEIGHT_TOTAL;
}

/**
 * Weighted quantiles over the draws: sort ascending, first value whose cumulative weight reaches q - 1e-12.
 *
 * Whole-number weights and counting by buckets make the answer exact and independent of the order of equal values.
 *
 * @param values One value per draw, shape (264,).
 * @param levels Probabilities [1], each in (0, 1], shape (k,).
 * @param out    Receives one value per level, shape (k,); may not alias values.
 * @returns `out`. All NaN when a value is NaN.
 * @throws {DomainError} when the number of values is not DRAW_COUNT.
 * @source Definition of a weighted quantile (inverse of the step distribution).
 */
export function drawQuantiles(
  values: ArrayLike<number>,
  levels: readonly number[],
  out: Float64Array = new Float64Array(levels.length),
): Float64Array {
  requireDraws(values);
  let lowest = Infinity;
  let highest = -Infinity;
  for (let d = 0; d < DRAW_COUNT; d++) {
    const v = values[d]!;
    if (v !== v) return out.fill(NaN);
    if (v < lowest) lowest = v;
    if (v > highest) highest = v;
  }
  if (lowest === highest) return out.fill(lowest);
  const scale = (BUCKETS - 1) / (highest - lowest);
  WEIGHT_IN.fill(0);
  FIRST_IN.fill(-1);
  for (let i = 0, d = 0; i < AMPLITUDE_NODES.length; i++) {
    const weight = NODE_THOUSANDTHS[i]!;
    for (const end = d + PHASE_COUNT; d < end; d++) {
      const bucket = ((values[d]! - lowest) * scale) | 0;
      WEIGHT_IN[bucket]! += weight;
      NEXT_IN[d] = FIRST_IN[bucket]!;
      FIRST_IN[bucket] = d;
    }
  }
  let bucket = 0;
  let before = 0;
  let sortedBucket = -1;
  let lastTarget = 0;
  for (let k = 0; k < levels.length; k++) {
    const target = (levels[k]! - 1e-12) * DRAW_WEIGHT_TOTAL;
    if (target < lastTarget) bucket = before = 0;
    lastTarget = target;
    while (bucket < BUCKETS - 1 && before + WEIGHT_IN[bucket]! < target) before += WEIGHT_IN[bucket++]!;
    if (bucket !== sortedBucket) sortBucket(values, bucket);
    sortedBucket = bucket;
    let at = 0;
    let reached = before + DRAW_WEIGHT_UNITS[SORTED[0]!]!;
    while (reached < target && SORTED[at + 1]! >= 0) reached += DRAW_WEIGHT_UNITS[SORTED[++at]!]!;
    out[k] = values[SORTED[at]!]!;
  }
  return out;
}

// Working space of drawQuantiles: per bucket its weight and a chain of its draws; the draws of one bucket in order of
// their values, ended by -1.
const BUCKETS = 128;
const WEIGHT_IN = new Int32Array(BUCKETS);
const FIRST_IN = new Int32Array(BUCKETS);
const NEXT_IN = new Int32Array(DRAW_COUNT);
const SORTED = new Int32Array(DRAW_COUNT + 1);

function sortBucket(values: ArrayLike<number>, bucket: number): void {
  let count = 0;
  for (let d = FIRST_IN[bucket]!; d >= 0; d = NEXT_IN[d]!) {
    const value = values[d]!;
    let at = count++;
    for (; at > 0 && values[SORTED[at - 1]!]! > value; at--) SORTED[at] = SORTED[at - 1]!;
    SORTED[at] = d;
  }
  SORTED[count] = -1;
}

function requireDraws(values: ArrayLike<number>): void {
  if (values.length !== DRAW_COUNT) throw new DomainError('number of draws', values.length, String(DRAW_COUNT));
}
