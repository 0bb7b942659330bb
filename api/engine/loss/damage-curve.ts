import { msFromKnots } from '../units.ts';

/** What wind a curve expects: the peak 3-s gust at 10 m in the exposure found at the site. */
export type GustBasis = {
  readonly averagingS: 3;
  readonly heightM: 10;
  readonly exposure: 'as found';
};

type CurveHead = {
  readonly code: string;
  readonly gustBasis: GustBasis;
  /** Whether the curve was fitted on gusts without or with the vortex layer. */
  readonly fittedOn: 'plain' | 'enhanced';
  readonly source: string;
  readonly version: string;
};

/** Cubic sigmoid of Emanuel: no damage up to the threshold, half the value at the half-damage gust. */
export type EmanuelCurve = CurveHead & {
  readonly kind: 'emanuel';
  readonly thresholdMs: number;
  readonly halfMs: number;
};

/** Piecewise linear in gust, flat outside its ends. */
export type PointsCurve = CurveHead & {
  readonly kind: 'points';
  readonly speedsMs: readonly number[];
  readonly ratios: readonly number[];
};

/** Mean damage ratio as a function of the peak gust. A curve is data: it can be stored, compared and sent. */
export type DamageCurve = EmanuelCurve | PointsCurve;

/** The only basis the chain produces gusts for. */
export const GUST_BASIS: GustBasis = { averagingS: 3, heightM: 10, exposure: 'as found' };

// The published thresholds are 1-min winds; a peak 3-s gust is 1.25 times the peak 1-min wind in open terrain.
const GUST_OVER_ONE_MINUTE = 1.25;

/** Curve used where none is named: Emanuel's, moved from 1-min winds to local 3-s gusts. */
export const REFERENCE_CURVE: EmanuelCurve = {
  code: 'EM50-150',
  kind: 'emanuel',
  thresholdMs: GUST_OVER_ONE_MINUTE * msFromKnots(50),
  halfMs: GUST_OVER_ONE_MINUTE * msFromKnots(150),
  gustBasis: GUST_BASIS,
  fittedOn: 'plain',
  source:
    'Emanuel (2011), Weather, Climate, and Society 3, 261–268; constants from memory; thresholds × 1.25 for 3-s gusts',
  version: '1',
};

/**
 * Lists what is wrong with a curve; an empty list means it can be used.
 *
 * @param curve The curve; gusts [m s⁻¹], ratios [1].
 * @returns One sentence per fault.
 * @source Rule of this product: strictly increasing gusts, non-decreasing ratios in 0..1, declared gust basis.
 */
export function damageCurveFaults(curve: DamageCurve): string[] {
  const faults: string[] = [];
  const { averagingS, heightM, exposure } = curve.gustBasis;
  if (averagingS !== 3 || heightM !== 10 || exposure !== 'as found') {
    faults.push(`The gust basis is ${averagingS} s at ${heightM} m, ${exposure}; it must be 3 s at 10 m, as found.`);
  }
  if (curve.kind === 'emanuel') {
    if (!(curve.thresholdMs >= 0)) faults.push(`The threshold is ${curve.thresholdMs} m/s; it must be 0 or more.`);
    if (!(curve.halfMs > curve.thresholdMs && curve.halfMs < Infinity)) {
      faults.push(`Half damage is at ${curve.halfMs} m/s; it must lie above the threshold ${curve.thresholdMs} m/s.`);
    }
    return faults;
  }
  const { speedsMs, ratios } = curve;
  if (speedsMs.length !== ratios.length) {
    faults.push(`There are ${speedsMs.length} gusts and ${ratios.length} damage ratios; each gust needs one ratio.`);
  }
  if (speedsMs.length < 2) faults.push(`There are ${speedsMs.length} points; a curve needs at least 2.`);
  speedsMs.forEach((speed, i) => {
    if (!(speed >= 0 && speed < Infinity)) faults.push(`Gust ${i + 1} is ${speed} m/s; it must be 0 or more.`);
    if (i > 0 && !(speed > speedsMs[i - 1]!)) {
      faults.push(`Gust ${i + 1} is ${speed} m/s, not above the one before it, ${speedsMs[i - 1]} m/s.`);
    }
  });
  ratios.forEach((ratio, i) => {
    if (!(ratio >= 0 && ratio <= 1)) faults.push(`Damage ratio ${i + 1} is ${ratio}; it must lie between 0 and 1.`);
    if (i > 0 && ratio < ratios[i - 1]!) {
      faults.push(`Damage ratio ${i + 1} is ${ratio}, below the one before it, ${ratios[i - 1]}.`);
    }
  });
  return faults;
}

/**
 * The gust up to which a curve gives no damage.
 *
 * @param curve A curve without faults.
 * @returns Threshold gust [m s⁻¹]; 0 for a curve that starts above nil, Infinity for one that is nil throughout.
 * @source Definition.
 */
export function damageThreshold(curve: DamageCurve): number {
  if (curve.kind === 'emanuel') return curve.thresholdMs;
  const first = curve.ratios.findIndex((ratio) => ratio > 0);
  if (first < 0) return Infinity;
  return first === 0 ? 0 : curve.speedsMs[first - 1]!;
}

/**
 * Mean damage ratio at a peak gust.
 *
 * @param curve  A curve without faults.
 * @param gustMs Peak 3-s gust at 10 m at the site [m s⁻¹].
 * @returns Repair cost over replacement value in 0..1 [1]. NaN for a NaN gust.
 * @source Emanuel (2011), Weather, Climate, and Society 3, 261–268, eq. 1; or linear interpolation.
 */
export function meanDamage(curve: DamageCurve, gustMs: number): number {
  if (curve.kind === 'emanuel') {
    if (gustMs <= curve.thresholdMs) return 0;
    if (gustMs === Infinity) return 1;
    const v = (gustMs - curve.thresholdMs) / (curve.halfMs - curve.thresholdMs);
    const cube = v * v * v;
    return cube / (1 + cube);
  }
  const { speedsMs, ratios } = curve;
  const last = speedsMs.length - 1;
  if (gustMs <= speedsMs[0]!) return ratios[0]!;
  if (gustMs >= speedsMs[last]!) return ratios[last]!;
  if (gustMs !== gustMs) return NaN;
  let lo = 0;
  let hi = last;
  while (hi - lo > 1) {
    const mid = (lo + hi) >> 1;
    if (speedsMs[mid]! <= gustMs) lo = mid;
    else hi = mid;
  }
  const share = (gustMs - speedsMs[lo]!) / (speedsMs[hi]! - speedsMs[lo]!);
  return ratios[lo]! + share * (ratios[hi]! - ratios[lo]!);
}
