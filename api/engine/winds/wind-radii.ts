/**
 * What the radii of 34-, 50- and 64-kt wind in four quadrants say about the outer wind of one fix.
 *
 * Symmetric part (`outerFit`): the exponent of Holland (2010) far out is the one with which the vortex carries 34 kt at
 * the mean reach of 34 kt. A radius is the greatest reach in its quadrant; 0.85 of the mean over the quadrants is taken
 * for the mean over azimuth, as is done for 64-kt radii. The motion adds about as much on one side as it takes from the
 * other, so the vortex alone carries the mean.
 *
 * Asymmetric part (`quadrantFactors`, `quadrantLogFactor`), a product rule: the wind of the whole field, vortex and
 * motion, is multiplied by exp(taper × L), where
 * - L has one value at the middle of each quadrant (45, 135, 225, 315 degrees) and goes smoothly over from each to the
 *   next, staying between the two;
 * - the taper is 0 up to rMax and 1 from 1.5 rMax on, smooth between;
 * - a strengthening closes at most three quarters of the gap, in the logarithm, to the wind at rMax on the same bearing.
 *
 * So nothing changes at or inside rMax, and no wind outside it comes to exceed the peak. Each L minimises the sum over
 * the radii of its quadrant of the squared logarithm of wind fitted over wind given; the wind fitted is the strongest of
 * the unfitted field in the quadrant at that radius, because that is what a radius is, times the factor of the middle.
 * L is kept in ln 0.6..ln 1.5. Radii within 1.25 rMax say nothing about the outer wind and are left out; a quadrant
 * with no other has L = 0.
 *
 * Use, for one fix: `windAt(r, bearing)` is the unfitted 1-min wind over open sea. Fitted wind = unfitted wind ×
 * exp(quadrantLogFactor(factors, r / rMax, bearing, ln(windAt(rMax, bearing) / windAt(r, bearing)))). Factors are plain
 * numbers that may be interpolated linearly in time; four zeros leave the field as it is, bit for bit.
 */
import { DomainError } from '../errors.ts';
import { outerExponentThrough, type SurfaceCore } from './holland-2010.ts';

/** Greatest reach of a wind speed in the quadrants NE, SE, SW, NW [m]; 0 = not reached or not given. */
export type QuadrantReach = readonly [number, number, number, number];

/** A wind speed and how far it reaches. */
export type WindRadii = {
  /** 1-min wind [m s⁻¹], > 0. */
  readonly wind: number;
  readonly reach: QuadrantReach;
};

/** Log-factors at the middle of the quadrants NE, SE, SW, NW [1]. */
export type QuadrantFactors = readonly [number, number, number, number];

/** An outer exponent and where it holds, or why there is none. */
export type OuterFit =
  | { readonly outerRadius: number; readonly outerExponent: number; readonly clamped: boolean; readonly reason: null }
  | { readonly outerRadius: null; readonly outerExponent: null; readonly clamped: false; readonly reason: string };

/** Mean over azimuth of a reach over the mean of the greatest reaches in quadrants [1]. From memory. */
export const QUADRANT_SHARE = 0.85;
/** Range of the outer exponent [1]. Product rule: 0.5 is the plain profile; 1.5 falls off about as the cube of it. */
const EXPONENT_RANGE = [0.3, 1.5] as const;
/** Range of the log-factors [1]. Product rule. */
const LOG_RANGE = [Math.log(0.6), Math.log(1.5)] as const;
/** Where the factor acts in full, in radii of maximum wind [1]. Product rule. */
const FULL_FROM = 1.5;
/** Radii up to here are left out, in radii of maximum wind [1]. Product rule: half of the factor acts there. */
const LEAST_SCALED_REACH = 1.25;
/** Share of the gap to the peak, in the logarithm, that a strengthening may close [1]. Product rule. */
const GAP_SHARE = 0.75;
const QUADRANT_DEG = 90;
const MIDDLES_DEG = [45, 135, 225, 315] as const;
/** Bearings from the middle at which a quadrant is searched for its strongest wind [deg]. */
const SEARCH_DEG = [-45, -30, -15, 0, 15, 30, 45] as const;

/**
 * Mean reach over azimuth from the greatest reaches in quadrants.
 *
 * @param reach Greatest reach by quadrant [m]; those of 0 do not count.
 * @returns Mean reach [m], null where no quadrant has one.
 * @source 0.85 of the mean, from memory.
 */
export function meanReach(reach: QuadrantReach): number | null {
  const reached = reach.filter((radius) => radius > 0);
  if (reached.length === 0) return null;
  return (QUADRANT_SHARE * reached.reduce((sum, radius) => sum + radius, 0)) / reached.length;
}

/**
 * Outer exponent of the Holland (2010) profile with which it carries a wind at the mean reach of its radii.
 *
 * @param core      Peak, radius and shape of the profile.
 * @param reach     Greatest reach of the wind by quadrant [m], null where none is given.
 * @param outerWind The wind the radii are of [m s⁻¹], > 0, in the averaging time and at the height of `core.maxWind`.
 * @returns Radius [m] and exponent [1] for the profile. The exponent is kept in 0.3..1.5, and so large that the wind falls
 *          all the way out; `clamped` says that it was changed and the profile misses the wind. With a reason instead,
 *          where there are no radii, the maximum is no stronger than the wind, or the reach lies within rMax.
 * @throws {DomainError} when core or wind is outside its range.
 * @source Holland, Belanger & Fritz (2010), Mon. Wea. Rev. 138, 4393–4401; from memory. The range is a product rule.
 */
export function outerFit(core: SurfaceCore, reach: QuadrantReach | null, outerWind: number): OuterFit {
  if (!(outerWind > 0)) throw new DomainError('outerWind', outerWind, '> 0 m/s');
  const outerRadius = reach === null ? null : meanReach(reach);
  if (outerRadius === null) return without('no radii given');
  if (!(core.maxWind > outerWind)) return without('the maximum wind is no stronger than the wind of the radii');
  if (!(outerRadius > core.rMax)) return without('the mean reach lies within the radius of maximum wind');
  const through = outerExponentThrough(core, outerRadius, outerWind);
  const least = Math.max(EXPONENT_RANGE[0], leastFallingExponent(core, outerRadius));
  const outerExponent = Math.min(Math.max(through, least), EXPONENT_RANGE[1]);
  return { outerRadius, outerExponent, clamped: outerExponent !== through, reason: null };
}

/**
 * Log-factors of the four quadrants with which a wind field carries the given winds at the given radii, as nearly as one
 * factor a quadrant can.
 *
 * @param rMax   Radius of maximum wind [m], > 0.
 * @param radii  Winds and their reaches, in any order; none = no change.
 * @param windAt Unfitted 1-min wind over open sea [m s⁻¹], motion included, by distance [m] and bearing from the centre
 *               [deg, clockwise from north].
 * @returns Log-factors NE, SE, SW, NW [1], each in ln 0.6..ln 1.5, for `quadrantLogFactor`.
 * @throws {DomainError} when rMax or a wind is outside its range.
 * @source Product rule: least squares of log wind, see the top of this file.
 */
export function quadrantFactors(
  rMax: number,
  radii: readonly WindRadii[],
  windAt: (r: number, bearingDeg: number) => number,
): QuadrantFactors {
  if (!(rMax > 0)) throw new DomainError('rMax', rMax, '> 0 m');
  for (const { wind } of radii) if (!(wind > 0)) throw new DomainError('wind', wind, '> 0 m/s');
  const inQuadrant = (quadrant: 0 | 1 | 2 | 3): number => {
    const terms: Term[] = [];
    for (const { wind, reach } of radii) {
      const r = reach[quadrant];
      if (!(r > LEAST_SCALED_REACH * rMax)) continue;
      const bearings = SEARCH_DEG.map((away) => MIDDLES_DEG[quadrant] + away);
      const winds = bearings.map((bearing) => windAt(r, bearing));
      const unfitted = Math.max(...winds);
      if (!(unfitted > 0)) continue;
      const peak = windAt(rMax, bearings[winds.indexOf(unfitted)]!);
      terms.push({
        taper: taper(r / rMax),
        wanted: Math.log(wind / unfitted),
        most: mostStrengthening(Math.log(peak / unfitted)),
      });
    }
    return bestLog(terms);
  };
  return [inQuadrant(0), inQuadrant(1), inQuadrant(2), inQuadrant(3)];
}

/**
 * Logarithm of the factor on the wind at one place.
 *
 * @param factors    Log-factors of the quadrants [1].
 * @param x          Distance from the centre over the radius of maximum wind [1], ≥ 0.
 * @param bearingDeg Bearing from the centre to the place [deg, clockwise from north].
 * @param gap        Logarithm of the unfitted wind at rMax on this bearing over the unfitted wind here [1]; negative counts
 *                   as 0.
 * @returns Log-factor [1]: 0 up to rMax; never more than three quarters of the gap. NaN for NaN.
 * @source Product rule, see the top of this file.
 */
export function quadrantLogFactor(factors: QuadrantFactors, x: number, bearingDeg: number, gap: number): number {
  const share = taper(x);
  if (share === 0) return 0;
  const log = share * betweenMiddles(factors, bearingDeg);
  return log <= 0 ? log : Math.min(log, mostStrengthening(gap));
}

/** One radius of a quadrant: how much of the factor acts there, the log-factor wanted, and the most there may be. */
type Term = { readonly taper: number; readonly wanted: number; readonly most: number };

/**
 * Minimum of Σ (wanted - min(taper L, most))² over the range of L. Between two values of L at which a term reaches its
 * most the sum is a parabola, so its least value is found piece by piece.
 */
function bestLog(terms: readonly Term[]): number {
  const [least, greatest] = LOG_RANGE;
  const ordered = [...terms].sort((a, b) => a.most / a.taper - b.most / b.taper);
  let best = { log: 0, cost: Infinity };
  let from: number = least;
  for (const [i, term] of ordered.entries()) {
    const to = Math.min(term.most / term.taper, greatest);
    const free = ordered.slice(i);
    const square = free.reduce((sum, t) => sum + t.taper * t.taper, 0);
    const log = Math.min(Math.max(free.reduce((sum, t) => sum + t.taper * t.wanted, 0) / square, from), to);
    const cost = terms.reduce((sum, t) => sum + (t.wanted - Math.min(t.taper * log, t.most)) ** 2, 0);
    if (cost < best.cost) best = { log, cost };
    from = to;
  }
  return best.log;
}

function mostStrengthening(gap: number): number {
  return gap < 0 ? 0 : GAP_SHARE * gap;
}

/** 0 up to rMax, 1 from 1.5 rMax on, slope continuous. */
function taper(x: number): number {
  if (x <= 1) return 0;
  return x >= FULL_FROM ? 1 : smooth((x - 1) / (FULL_FROM - 1));
}

/** Value between the middles of the quadrants, slope continuous and level at the middles. */
function betweenMiddles(factors: QuadrantFactors, bearingDeg: number): number {
  const place = (bearingDeg - MIDDLES_DEG[0]) / QUADRANT_DEG;
  const before = Math.floor(place);
  const from = factors[modulo4(before)]!;
  return from + smooth(place - before) * (factors[modulo4(before + 1)]! - from);
}

const modulo4 = (n: number): number => ((n % 4) + 4) % 4;

function smooth(s: number): number {
  return s * s * (3 - 2 * s);
}

/** Exponent at which the wind at the outer radius no longer falls outwards, from the slope of the logarithm there. */
function leastFallingExponent({ rMax, bs }: SurfaceCore, outerRadius: number): number {
  const x = (rMax / outerRadius) ** bs;
  const fall = (bs * (1 - x)) / outerRadius;
  const bend = -(Math.log(x) + 1 - x) / (outerRadius - rMax);
  return (0.5 * bend) / (fall + bend);
}

function without(reason: string): OuterFit {
  return { outerRadius: null, outerExponent: null, clamped: false, reason };
}
