import {
  crestAzimuths,
  kirchhoffRate,
  observedPhase,
  patternFactor,
  startingPhases,
  UNKNOWN_PHASE,
  type ObservedEllipse,
  type ObservedVortices,
} from '../ring/observed-vortices.ts';
import { nearestRingOf, widthsOf, type RingChoice } from '../ring/ring-of-count.ts';
import { degrees } from '../units.ts';
import { hemisphereSign } from '../winds/coriolis.ts';
import type { EngineNotice, ResolvedFix } from './fixes.ts';
import { patternAngleAt, patternAngles, patternRateAt } from './pattern-angle.ts';
import { positionAt } from './position.ts';

/** What the draws were conditioned on; angles of the pattern, 360 degrees to a wavelength. */
export type Conditioned = {
  readonly wavenumber: number;
  readonly phaseDeg: number;
  readonly sigmaDeg: number;
  readonly residualDeg: number;
  /** Observations that set the phase. */
  readonly observations: number;
};

/** Relative error of the linear pattern rate against the breakdown model [1]. */
const RATE_ERROR = 0.05;

/**
 * Moves the rings on which an observed number of vortices doesn't grow fastest to the nearest one on which it does.
 *
 * @param rings Ring of each fix, given or default.
 * @param m     Observed number of vortices; null = none observed.
 * @returns Rings, what was changed in words by field for each fix, and notices.
 * @source ring/ring-of-count.ts.
 */
export function boundRings(
  rings: readonly RingChoice[],
  m: number | null,
): { rings: readonly RingChoice[]; filled: readonly Readonly<Record<string, string>>[]; notices: EngineNotice[] } {
  const asGiven = { rings, filled: rings.map(() => ({})) };
  if (m === null) return { ...asGiven, notices: [] };
  const code = 'ring-bounded-by-observation';
  if (m === 2) {
    const text =
      'Two vortices, or an ellipse, bound neither ring width nor eye ratio: waves of number 2 don’t grow here.';
    return { ...asGiven, notices: [{ code, text }] };
  }
  const known = new Map<string, RingChoice | null>();
  const nearest = rings.map((ring) => {
    const key = `${ring.ringWidth} ${ring.eyeRatio}`;
    if (!known.has(key)) known.set(key, nearestRingOf(ring, m));
    return known.get(key)! ?? ring;
  });
  const why = `so that ${m} vortices grow`;
  const filled = nearest.map((ring, i) => {
    const words: Record<string, string> = {};
    const { ringWidth, eyeRatio } = rings[i]!;
    if (ring.ringWidth !== ringWidth) words.ringWidthFraction = `moved from ${ringWidth} ${why}`;
    if (ring.eyeRatio !== eyeRatio) words.eyeVorticityRatio = `moved from ${eyeRatio} ${why}`;
    return words;
  });
  const moved = nearest.filter((ring, i) => ring !== rings[i]).length;
  const eyes = [...new Set(nearest.map(({ eyeRatio }) => eyeRatio))];
  const widths = eyes.flatMap((eye) => {
    const range = widthsOf(eye, m);
    return range ? [`${range.thinnest}–${range.widest} at an eye ratio of ${eye}`] : [];
  });
  const text = `${m} vortices grow fastest on rings of width ${widths.join(', ')}. Rings moved there: ${moved} of ${rings.length} fixes.`;
  return { rings: nearest, filled, notices: [{ code, text }] };
}

/**
 * Takes the pattern's rate and starting phase from what was seen of it.
 *
 * @param fixes      Resolved fixes.
 * @param wavenumber Number of vortices; null = the layer is off.
 * @param seen       Observations of that number; empty = the phase stays unknown.
 * @returns Fixes, their pattern turning as seen; starting phases of the draws [rad]; what they rest on; notices.
 * @source ring/observed-vortices.ts.
 */
export function conditionOn(
  fixes: readonly ResolvedFix[],
  wavenumber: number | null,
  seen: readonly ObservedVortices[],
): {
  fixes: readonly ResolvedFix[];
  phases: readonly number[];
  conditioned: Conditioned | null;
  notices: EngineNotice[];
} {
  if (seen.length === 0) return { fixes, phases: startingPhases(null), conditioned: null, notices: [] };
  if (wavenumber === null) {
    const text = 'Observed vortices have no effect: no ring of this storm grows any.';
    return {
      fixes,
      phases: startingPhases(null),
      conditioned: null,
      notices: [{ code: 'observation-without-effect', text }],
    };
  }
  const timed = seen.flatMap((entry) =>
    entry.kind === 'ellipse' && entry.rotationPeriodS !== null ? [{ ...entry, periodS: entry.rotationPeriodS }] : [],
  );
  const factor = patternFactor(timed.map((entry) => ({ ...entry, ownRate: patternRateAt(fixes, entry.timeS) })));
  const turning =
    timed.length === 0 ? fixes : fixes.map((fix) => ({ ...fix, patternRadPerS: factor * fix.patternRadPerS! }));
  const angles = patternAngles(turning);
  const observed = observedPhase(
    seen.map((entry) => ({
      azimuths: crestAzimuths(entry, hemisphereSign(positionAt(fixes, entry.timeS).latitude)),
      turned: patternAngleAt(turning, angles, entry.timeS),
      uncertaintyDeg: entry.uncertaintyDeg,
    })),
    wavenumber,
  );
  const conditioned = {
    wavenumber,
    phaseDeg: degrees(observed.phase),
    sigmaDeg: degrees(observed.sigma),
    residualDeg: degrees(observed.residual),
    observations: seen.length,
  };
  const drift = degrees(RATE_ERROR * patternRateAt(turning, seen[0]!.timeS)) * 3600;
  return {
    fixes: turning,
    phases: startingPhases(observed),
    conditioned,
    notices: [
      { code: 'conditioned-on-observation', text: wordsOf(conditioned, seen, drift) },
      ...timed.map((entry) => rateNotice(entry, turning, factor)),
    ],
  };
}

function wordsOf(
  { wavenumber, sigmaDeg, residualDeg }: Conditioned,
  seen: readonly ObservedVortices[],
  driftDeg: number,
): string {
  const around = (phaseDeg: number): string => `${(phaseDeg / wavenumber).toFixed(0)}°`;
  const head = `Conditioned on ${wavenumber} observed vortices at ${seen.map(({ timeLabel }) => timeLabel).join(', ')}`;
  if (sigmaDeg > degrees(UNKNOWN_PHASE)) {
    return `${head}: only their number is used. The azimuths are uncertain by ${around(sigmaDeg)}, which says nothing about a pattern that repeats every ${around(360)}.`;
  }
  const fit = `the maxima lie ${around(residualDeg)} from a regular pattern`;
  return `${head}: crest azimuths ± ${around(sigmaDeg)} then (${fit}). The pattern’s rate is good to about 5 %, which moves crests by a further ${driftDeg.toFixed(0)}° an hour away from that time; not in the percentiles.`;
}

function rateNotice(
  { majorM, minorM, periodS }: ObservedEllipse & { periodS: number },
  fixes: readonly ResolvedFix[],
  factor: number,
): EngineNotice {
  const needed = (2 * Math.PI) / periodS / kirchhoffRate(1, majorM, minorM);
  const own = Math.max(...fixes.map(({ averageVorticityPerS }) => averageVorticityPerS));
  const text = `The pattern turns ${factor.toFixed(2)} times as fast as the ring alone would have it, as the ellipse seen did. By Kirchhoff’s relation its axes and period need a vorticity of ${(1000 * needed).toFixed(2)}e-3 s⁻¹; the ring holds up to ${(1000 * own).toFixed(2)}e-3 s⁻¹ on average.`;
  return { code: 'pattern-rate-observed', text };
}
