import { LEAST_PRESSURE_DEFICIT } from '../constants.ts';
import { msFromKnots, radians } from '../units.ts';
import { motionWind } from '../winds/asymmetry.ts';
import { coriolis, hemisphereSign } from '../winds/coriolis.ts';
import { fieldStateOf, makeSeaWindSteps, type FieldState } from '../winds/field-state.ts';
import { surfaceShare } from '../winds/implied-wind.ts';
import type { OuterWind } from '../winds/radial-profile.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import { fitVortex } from '../winds/vortex-fit.ts';
import { outerFit, quadrantFactors, type QuadrantFactors, type WindRadii } from '../winds/wind-radii.ts';
import type { EngineNotice, ResolvedFix, TrackFix } from './fixes.ts';
import { oneMinuteOverTen, type ChainOptions } from './options.ts';

/** What the radii of a fix say about its outer wind. */
export type OuterFix = {
  readonly timeS: number;
  readonly outer: OuterWind | null;
  readonly quadrants: QuadrantFactors | null;
};

const GALE = msFromKnots(34);
const STORM = msFromKnots(50);
const HURRICANE = msFromKnots(64);
const LEVEL: QuadrantFactors = [0, 0, 0, 0];

/**
 * Fits outer wind and quadrants to the radii of a track, where they are chosen.
 *
 * @param given    Fixes as given, with their radii.
 * @param resolved The same fixes resolved.
 * @param options  Choices of the chain.
 * @returns One entry per fix, and why a choice is without effect.
 * @source winds/wind-radii.ts.
 */
export function fitOuterWinds(
  given: readonly TrackFix[],
  resolved: readonly ResolvedFix[],
  options: ChainOptions,
): { fixes: OuterFix[]; notices: EngineNotice[] } {
  const notices: EngineNotice[] = [];
  const canFit = options.profile === 'holland-2010' && options.asymmetry !== 'kepert';
  const wantsOuter = options.outerWind === 'radii-34';
  if (wantsOuter && !canFit) {
    notices.push({
      code: 'outer-wind-without-effect',
      text: 'The outer wind through the 34-kt radii has no effect: only the profile of Holland et al. (2010), without the boundary layer of Kepert, can be drawn through it.',
    });
  }
  const misses: string[] = [];
  const fixes = resolved.map((fix, i): OuterFix => {
    const { timeS } = fix;
    const bare = stateOfFix(fix, null, options);
    let outer: OuterWind | null = null;
    if (wantsOuter && canFit) {
      const fit = outerFit(bare.revised!, given[i]!.radius34KtM, GALE / oneMinuteOverTen(options.averaging));
      if (fit.reason === null) outer = { outerRadius: fit.outerRadius, outerExponent: fit.outerExponent };
      if (fit.reason !== null) misses.push(`fix ${i + 1}: ${fit.reason}`);
      else if (fit.clamped) misses.push(`fix ${i + 1}: the exponent is at the end of its range`);
    }
    const quadrants =
      options.quadrants === 'radii' ? quadrantsOf(given[i]!, stateOfFix(fix, outer, options), options) : null;
    return { timeS, outer, quadrants };
  });
  if (misses.length > 0) {
    notices.push({
      code: 'outer-wind-not-met',
      text: `The wind doesn't pass through the 34-kt radii at ${misses.join('; ')}.`,
    });
  }
  if (options.quadrants === 'radii' && given.every((fix) => radiiOf(fix).length === 0)) {
    notices.push({
      code: 'quadrants-without-effect',
      text: 'No fix has wind radii: the quadrants follow the motion alone.',
    });
  }
  return { fixes, notices };
}

/**
 * Outer wind and quadrants at a time, linear between the fixes that have them.
 *
 * @param fixes Entries of fitOuterWinds.
 * @param timeS Time [s].
 * @param rMax  Radius of maximum wind at that time [m].
 * @returns Outer wind, null where no fix has one or it would lie within rMax; log-factors, null where not chosen.
 * @source Linear in time, constant beyond the first and last.
 */
export function outerWindAt(
  fixes: readonly OuterFix[],
  timeS: number,
  rMax: number,
): { outer: OuterWind | null; quadrants: QuadrantFactors | null } {
  const mixed = between(
    fixes.flatMap((fix) => (fix.outer === null ? [] : [{ timeS: fix.timeS, outer: fix.outer }])),
    timeS,
    (a, b, share) => ({
      outerRadius: mix(a.outer.outerRadius, b.outer.outerRadius, share),
      outerExponent: mix(a.outer.outerExponent, b.outer.outerExponent, share),
    }),
  );
  const quadrants = between(
    fixes.flatMap((fix) => (fix.quadrants === null ? [] : [{ timeS: fix.timeS, factors: fix.quadrants }])),
    timeS,
    (a, b, share) => LEVEL.map((_, q) => mix(a.factors[q]!, b.factors[q]!, share)) as unknown as QuadrantFactors,
  );
  return { outer: mixed !== null && mixed.outerRadius > rMax ? mixed : null, quadrants };
}

function between<T extends { timeS: number }, R>(
  known: readonly T[],
  timeS: number,
  blend: (a: T, b: T, share: number) => R,
): R | null {
  if (known.length === 0) return null;
  const after = known.findIndex((entry) => entry.timeS > timeS);
  const b = after < 0 ? known[known.length - 1]! : known[after]!;
  const a = after > 0 ? known[after - 1]! : b;
  return blend(a, b, a === b ? 0 : (timeS - a.timeS) / (b.timeS - a.timeS));
}

function mix(from: number, to: number, share: number): number {
  return from + share * (to - from);
}

function radiiOf({ radius34KtM, radius50KtM, radius64KtM }: TrackFix): WindRadii[] {
  const listed = [
    { wind: GALE, reach: radius34KtM },
    { wind: STORM, reach: radius50KtM },
    { wind: HURRICANE, reach: radius64KtM },
  ];
  return listed.flatMap(({ wind, reach }) => (reach?.some((radius) => radius > 0) ? [{ wind, reach }] : []));
}

function quadrantsOf(given: TrackFix, state: FieldState, options: ChainOptions): QuadrantFactors {
  const radii = radiiOf(given);
  if (radii.length === 0) return LEVEL;
  const { write } = seaWindOf({ ...options, quadrants: 'motion' });
  const out = makeSeaWindSteps();
  return quadrantFactors(state.rMax, radii, (r, bearingDeg) => {
    const bearing = radians(bearingDeg);
    write(state, r, Math.sin(bearing), Math.cos(bearing), out);
    return oneMinuteOverTen(options.averaging) * Math.hypot(out.eastward, out.northward);
  });
}

function stateOfFix(fix: ResolvedFix, outer: OuterWind | null, options: ChainOptions): FieldState {
  const { latitude, translationMs: speed, headingDeg: heading, anchoredMaxWindMs: maxWind, radiusOfMaxWindM } = fix;
  const share = surfaceShare(fix.intensitySource === 'pressure', options);
  const deficit = Math.max(fix.ambientPressurePa - fix.centralPressurePa, LEAST_PRESSURE_DEFICIT);
  const vortex = fitVortex(maxWind, speed, radiusOfMaxWindM, coriolis(latitude), deficit, options, share);
  const sign = hemisphereSign(latitude);
  const motion = motionWind(speed, heading, sign);
  const storm = { vortex, latitude, sign, speed, heading, maxWind, motion, surfaceShare: share };
  return fieldStateOf({ ...storm, outer, quadrants: null }, options);
}
