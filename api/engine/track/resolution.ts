import { LEAST_PRESSURE_DEFICIT } from '../constants.ts';
import type { LandIndex } from '../geo/land.ts';
import { observedCount, requireObservations, type ObservedVortices } from '../ring/observed-vortices.ts';
import { meanAmplitude } from '../ring/regimes.ts';
import { DEFAULT_EYE_RATIO, DEFAULT_RING_WIDTH } from '../ring/stability.ts';
import { coriolis } from '../winds/coriolis.ts';
import { surfaceShare } from '../winds/implied-wind.ts';
import { fitVortex } from '../winds/vortex-fit.ts';
import { choiceNotices } from './choice-words.ts';
import { boundRings, conditionOn, type Conditioned } from './conditioning.ts';
import { requireTrack, type Anchor, type EngineNotice, type ResolvedFix, type TrackFix } from './fixes.ts';
import { hoursInlandOf, inlandSpellsOf, type HoursInland } from './inland.ts';
import { weakeningOf, type WeakenedIntensity, type Weakening } from './inland-weakening.ts';
import { fitOuterWinds, type OuterFix } from './outer-wind.ts';
import { resolveIntensity, type IntensityFix } from './intensity.ts';
import { requireOptions, type ChainOptions } from './options.ts';
import { layVortices } from './vortex-layer.ts';

/** A resolved track. */
export type TrackResolution = {
  readonly fixes: readonly ResolvedFix[];
  readonly wavenumber: number | null;
  /** Starting phase of each of the draws' 24 patterns [rad]. */
  readonly phases: readonly number[];
  /** What was observed of the pattern; null where nothing was, or it has no effect. */
  readonly conditioned: Conditioned | null;
  readonly hoursInland: HoursInland;
  /** Weakening by a relation; null where the track's own intensities hold throughout. */
  readonly weakening: Weakening | null;
  /** What the radii say about the outer wind; null where it isn't asked. */
  readonly outer: readonly OuterFix[] | null;
  readonly notices: readonly EngineNotice[];
};

/**
 * Fills what a track leaves open, settles each fix's intensity and lays the vortex ring; says what was filled and by what.
 *
 * @param fixes   At least two fixes at strictly increasing times.
 * @param options Choices of the chain.
 * @param land    Land polygons for the hours inland, null when there are none to ask.
 * @param observations What radar or satellite showed of the vortices, at times within the track.
 * @returns Resolved fixes, number of vortices (null = layer off), hours inland as a function of time, notices.
 * @throws {DomainError} when the track, an option or an observation is outside its range.
 * @source Order of this chain; relations are named in each fix's `filled`.
 */
export function resolveFixes(
  fixes: readonly TrackFix[],
  options: ChainOptions,
  land: LandIndex | null = null,
  observations: readonly ObservedVortices[] = [],
): TrackResolution {
  requireTrack(fixes);
  requireOptions(options);
  requireObservations(observations, fixes[0]!.timeS, fixes.at(-1)!.timeS);
  const observed = options.mesovortices && observations.length > 0 ? observedCount(observations) : null;
  const { fixes: asGiven, notices } = resolveIntensity(fixes, options);
  const weakening = weakeningOf(fixes, asGiven, inlandSpellsOf(fixes, land), options);
  const settled = asGiven.map((entry, i) => (weakening ? weakened(entry, weakening(fixes[i]!.timeS)) : entry));
  const hoursInland = hoursInlandOf(fixes, land);
  const bound = boundRings(
    fixes.map(({ ringWidthFraction, eyeVorticityRatio }) => ({
      ringWidth: ringWidthFraction ?? DEFAULT_RING_WIDTH,
      eyeRatio: eyeVorticityRatio ?? DEFAULT_EYE_RATIO,
    })),
    observed && observed.wavenumber,
  );
  const inputs = settled.map((entry, i) => ({
    maxWind: entry.maxWind,
    speed: entry.speed,
    rMax: entry.rMax,
    ...bound.rings[i]!,
    hoursInland: hoursInland(fixes[i]!.timeS),
    anchor: anchorOf(entry, options),
  }));
  const layer = layVortices(
    inputs,
    options.mesovortices,
    options.averaging,
    observed && observed.wavenumber,
    meanAmplitude(options.regime),
  );
  const unconditioned = settled.map((entry, i): ResolvedFix => {
    const given = fixes[i]!;
    const input = inputs[i]!;
    const own = layer.fixes[i]!;
    const share = surfaceShare(entry.source === 'pressure', options);
    const deficit = Math.max(entry.ambientPressure - entry.centralPressure, LEAST_PRESSURE_DEFICIT);
    return {
      timeS: given.timeS,
      latitude: given.latitude,
      longitude: given.longitude,
      centralPressurePa: entry.centralPressure,
      ambientPressurePa: entry.ambientPressure,
      maxWindAsGivenMs: given.maxWindMs,
      windAveragingS: given.windAveragingS,
      reportedMaxWindMs: entry.reportedMaxWind,
      pressureImpliedMaxWindMs: entry.impliedMaxWind,
      maxWindMs: entry.maxWind,
      intensitySource: entry.source,
      radiusOfMaxWindM: entry.rMax,
      ringWidthFraction: input.ringWidth,
      eyeVorticityRatio: input.eyeRatio,
      hoursInland: input.hoursInland,
      translationMs: entry.speed,
      headingDeg: entry.heading,
      anchor: input.anchor,
      anchoredMaxWindMs: own.maxWind,
      axisymmetricMaxWindMs: own.axisymmetricMax,
      averageVorticityPerS: own.averageVorticity,
      shapeB: fitVortex(own.maxWind, entry.speed, entry.rMax, coriolis(given.latitude), deficit, options, share).b,
      amplitude: own.amplitude,
      patternRadPerS: own.pattern,
      filled: { ...entry.filled, ...filledRing(given, land), ...bound.filled[i] },
      flags: entry.flags,
    };
  });
  const pattern = conditionOn(unconditioned, layer.wavenumber, observed ? observed.used : []);
  const resolved = pattern.fixes;
  notices.push(...choiceNotices(options));
  notices.push(anchorNotice(resolved, layer.wavenumber));
  if (options.mesovortices && layer.wavenumber === null) {
    notices.push({ code: 'vortex-layer-off', text: 'No ring of this storm grows vortices: enhanced equals plain.' });
  }
  notices.push(...bound.notices, ...pattern.notices, ...unusedNotices(observations, observed && observed.used));
  if (options.decay !== 'as-given' && weakening === null) {
    notices.push({
      code: 'decay-without-effect',
      text: 'The centre crosses no coast from the sea: nothing decays over land.',
    });
  }
  const outer = usesRadii(options) ? fitOuterWinds(fixes, resolved, options) : null;
  if (outer) notices.push(...outer.notices);
  return {
    fixes: resolved,
    wavenumber: layer.wavenumber,
    phases: pattern.phases,
    conditioned: pattern.conditioned,
    hoursInland,
    weakening,
    outer: outer && outer.fixes,
    notices,
  };
}

/** Says which observations are not used, and why. */
function unusedNotices(
  observations: readonly ObservedVortices[],
  used: readonly ObservedVortices[] | null,
): EngineNotice[] {
  if (observations.length === 0) return [];
  if (used === null) {
    return [{ code: 'observations-ignored', text: 'Observed vortices are ignored: the vortex layer is off.' }];
  }
  if (used.length === observations.length) return [];
  const aside = observations.filter((seen) => !used.includes(seen)).map(({ timeLabel }) => timeLabel);
  const text = `Observations that show another number of vortices are set aside: ${aside.join(', ')}. A storm keeps one number throughout.`;
  return [{ code: 'observations-set-aside', text }];
}

function usesRadii({ outerWind, quadrants }: ChainOptions): boolean {
  return outerWind === 'radii-34' || quadrants === 'radii';
}

/** A fix with the intensity a relation gives it, where it gives one other than its own. */
function weakened(entry: IntensityFix, intensity: WeakenedIntensity | null): IntensityFix {
  if (intensity === null || intensity.maxWind === entry.maxWind) return entry;
  const { maxWind, deficit, relation } = intensity;
  const filled = { ...entry.filled, maxWindMs: `${relation}, after landfall` };
  if (deficit === null) return { ...entry, maxWind, filled };
  const pressure = { centralPressureHpa: `${relation}, after landfall` };
  return { ...entry, maxWind, centralPressure: entry.ambientPressure - deficit, filled: { ...filled, ...pressure } };
}

function anchorOf({ source }: IntensityFix, { anchor }: ChainOptions): Anchor {
  if (anchor !== 'auto') return anchor;
  return source === 'wind' ? 'peak' : 'mean';
}

function filledRing(given: TrackFix, land: LandIndex | null): Record<string, string> {
  const filled: Record<string, string> = {};
  if (given.ringWidthFraction === null) filled.ringWidthFraction = `default ${DEFAULT_RING_WIDTH}`;
  if (given.eyeVorticityRatio === null) filled.eyeVorticityRatio = `default ${DEFAULT_EYE_RATIO}`;
  if (given.hoursInland === null) filled.hoursInland = land ? 'land polygons' : 'none: 0';
  return filled;
}

function anchorNotice(fixes: readonly ResolvedFix[], wavenumber: number | null): EngineNotice {
  const peak = fixes.filter(({ anchor }) => anchor === 'peak').length;
  const meaning = {
    mean: 'Anchor "mean": the maximum wind is taken as the mean around the ring, vortex peaks exceed it.',
    peak: 'Anchor "peak": the maximum wind is taken to hold vortex peaks already and is divided accordingly.',
  };
  const mixed = `Anchor "peak" at ${peak} of ${fixes.length} fixes (maximum wind divided), "mean" at the others.`;
  const text = peak === 0 ? meaning.mean : peak === fixes.length ? meaning.peak : mixed;
  return { code: 'anchor', text: wavenumber === null ? `${text} The vortex layer is off.` : text };
}
