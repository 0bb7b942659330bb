import type { Fix, ResolvedFix, Track, TrackFinding, TrackResolution } from '#contract/scenarios.ts';
import { DomainError } from '#engine/errors.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { isLand } from '#engine/geo/land.ts';
import type { EngineNotice, ResolvedFix as EngineFix, TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { positionAt } from '#engine/track/position.ts';
import { resolveFixes } from '#engine/track/resolution.ts';
import { PA_PER_HPA } from '#engine/units.ts';
import { engineFix } from '../../compute/asked-fixes.ts';
import { engineObservations } from '../../compute/asked-vortices.ts';
import { fixList, plain } from './reading/track-wording.ts';
import { checkEntry, checkResolved } from './track-rules.ts';

const PATH_STEP_S = 1800;

/** Fixes as the engine takes them. */
export const engineFixes = ({ fixes, declarations }: Track): TrackFix[] =>
  fixes.map((fix) => engineFix(fix, declarations.windAveragingS));

const isoOf = (timeS: number) => new Date(Math.round(timeS * 1000)).toISOString();

const toContract = (fix: EngineFix, land: LandIndex): ResolvedFix => ({
  time: isoOf(fix.timeS),
  latitude: fix.latitude,
  longitude: fix.longitude,
  centralPressureHpa: fix.centralPressurePa / PA_PER_HPA,
  ambientPressureHpa: fix.ambientPressurePa / PA_PER_HPA,
  reportedMaxWindMs: fix.reportedMaxWindMs,
  pressureImpliedMaxWindMs: fix.pressureImpliedMaxWindMs,
  maxWindMs: fix.maxWindMs,
  intensitySource: fix.intensitySource,
  radiusOfMaxWindM: fix.radiusOfMaxWindM,
  headingDeg: fix.headingDeg,
  speedMs: fix.translationMs,
  hoursInland: fix.hoursInland,
  overLand: isLand(land, fix.latitude, fix.longitude),
  anchor: fix.anchor,
  amplitude: fix.amplitude,
  filled: { ...fix.filled },
  flags: [...fix.flags],
});

/** One point each half hour and at the end, longitudes running on past ±180 so that the line is one. */
const pathOf = (fixes: readonly TrackFix[]): [number, number][] => {
  const first = fixes[0]!.timeS;
  const last = fixes.at(-1)!.timeS;
  const times = Array.from({ length: Math.ceil((last - first) / PATH_STEP_S) }, (_, i) => first + i * PATH_STEP_S);
  let before: number | null = null;
  return [...times, last].map((timeS) => {
    const { latitude, longitude } = positionAt(fixes, timeS);
    const turns: number = before === null ? 0 : Math.round((before - longitude) / 360);
    before = longitude + 360 * turns;
    return [before, latitude];
  });
};

/** TRACK-10: the engine's own comparison of both maxima, as one finding. */
const disagreement = (fixes: readonly ResolvedFix[], notices: readonly EngineNotice[]): TrackFinding[] => {
  const numbers = notices
    .filter(({ code }) => code === 'wind-and-pressure-differ')
    .map(({ text }) => Number(/^Fix (\d+)/.exec(text)?.[1]));
  if (numbers.length === 0) return [];
  const gap = (number: number) => {
    const { reportedMaxWindMs, pressureImpliedMaxWindMs } = fixes[number - 1]!;
    return Math.abs(reportedMaxWindMs! - pressureImpliedMaxWindMs!);
  };
  const widest = numbers.reduce((best, number) => (gap(number) > gap(best) ? number : best));
  const { reportedMaxWindMs, pressureImpliedMaxWindMs, intensitySource } = fixes[widest - 1]!;
  return [
    {
      code: 'TRACK-10',
      severity: 'note',
      fix: numbers.length === 1 ? widest - 1 : null,
      text: `${fixList(numbers)} given a wind and a pressure that don’t belong to one usual storm. Widest at fix ${widest}: ${plain(reportedMaxWindMs!)} m/s reported, ${plain(pressureImpliedMaxWindMs!)} m/s implied by the pressure, both 1-min. The ${intensitySource} is used; the switch “intensity from” changes that.`,
    },
  ];
};

/** Notices about what radar or satellite showed, in the engine's order. */
const OF_OBSERVATIONS = [
  'conditioned-on-observation',
  'ring-bounded-by-observation',
  'pattern-rate-observed',
  'observations-set-aside',
  'observation-without-effect',
];

/** TRACK-20: what observed vortices set, as notes. */
const observed = (notices: readonly EngineNotice[]): TrackFinding[] =>
  notices
    .filter(({ code }) => OF_OBSERVATIONS.includes(code))
    .map(({ text }) => ({ code: 'TRACK-20', severity: 'note', fix: null, text }));

const strongest = (fixes: readonly ResolvedFix[], intensity: ChainOptions['intensity']): TrackResolution['maxima'] => {
  if (fixes.length === 0) return { fix: 0, reportedMs: null, pressureImpliedMs: null, used: intensity };
  const at = fixes.reduce((best, fix, i) => (fix.maxWindMs > fixes[best]!.maxWindMs ? i : best), 0);
  const { reportedMaxWindMs, pressureImpliedMaxWindMs, intensitySource } = fixes[at]!;
  return { fix: at, reportedMs: reportedMaxWindMs, pressureImpliedMs: pressureImpliedMaxWindMs, used: intensitySource };
};

const hemisphereOf = (fixes: readonly Fix[]): TrackResolution['hemisphere'] =>
  fixes.reduce((sum, { latitude }) => sum + latitude, 0) < 0 ? 'south' : 'north';

export type Resolved = { track: Track; resolution: TrackResolution };

/**
 * What the service fills in and what it finds odd.
 *
 * While a finding refuses the track, or asks for consent, nothing is resolved: the reply holds the findings alone.
 */
export const resolveTrack = (
  entered: Track,
  intensity: ChainOptions['intensity'],
  sortByTime: boolean,
  land: LandIndex,
): Resolved => {
  const { fixes, findings } = checkEntry(entered.fixes, sortByTime, entered.vortices);
  const track = { ...entered, fixes };
  const unresolved = (said: TrackFinding[]): Resolved => ({
    track,
    resolution: {
      fixes: [],
      findings: said,
      path: [],
      wavenumber: null,
      hemisphere: hemisphereOf(fixes),
      maxima: strongest([], intensity),
    },
  });
  if (findings.some(({ severity }) => severity !== 'note')) return unresolved(findings);
  const given = engineFixes(track);
  try {
    const options = { ...DEFAULT_OPTIONS, intensity };
    const observations = engineObservations(track.vortices);
    const { fixes: engine, wavenumber, notices } = resolveFixes(given, options, land, observations);
    const resolved = engine.map((fix) => toContract(fix, land));
    return {
      track,
      resolution: {
        fixes: resolved,
        findings: [...findings, ...checkResolved(resolved), ...disagreement(resolved, notices), ...observed(notices)],
        path: pathOf(given),
        wavenumber,
        hemisphere: hemisphereOf(fixes),
        maxima: strongest(resolved, intensity),
      },
    };
  } catch (error) {
    if (!(error instanceof DomainError)) throw error;
    const text = `${error.message.charAt(0).toUpperCase()}${error.message.slice(1)}. The wind field can’t be built from that. Correct the value.`;
    return unresolved([...findings, { code: 'TRACK-17', severity: 'refuse', fix: null, text }]);
  }
};
