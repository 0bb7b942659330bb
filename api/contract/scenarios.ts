import { z } from 'zod';
import { Digest, Id, Instant, Notice, PageQuery, pageOf } from './common.ts';
import { Derivation } from './derivations.ts';
import { endpoint } from './endpoint.ts';
import { VortexObservations } from './observed-vortices.ts';
import { READERS, TRACK_WRITERS } from './roles.ts';
import { Stale } from './track-age.ts';

export const Averaging = z.union([z.literal(60), z.literal(120), z.literal(180), z.literal(600)], {
  error: 'Declare how long the winds were averaged: 60, 120, 180 or 600 seconds. A 10-min wind reads about 5 % lower.',
});
export const Intensity = z.enum(['pressure', 'wind']);
export const Anchor = z.enum(['auto', 'mean', 'peak']);
export const Regime = z.enum(['mixed', 'quasi-steady', 'breakdown'], 'Available: mixed, quasi-steady, breakdown.');

const metres = z.number().min(0);
/** Reach of a wind in the quadrants NE, SE, SW, NW [m]; 0 is none, null not given. */
const WindRadii = z.tuple([metres, metres, metres, metres]).nullable();

/**
 * A fix as entered, m/s, m and hPa; null is "not given". The bounds here only keep nonsense out of the arithmetic:
 * what is plausible is said by the TRACK rules, in words, for every fix at once.
 */
export const Fix = z.object({
  time: Instant,
  latitude: z.number().min(-90).max(90),
  longitude: z.number().min(-180).max(180),
  centralPressureHpa: z.number().min(0).max(200_000).nullable(),
  ambientPressureHpa: z.number().min(0).max(200_000).nullable(),
  maxWindMs: z.number().min(0).max(1000).nullable(),
  radiusOfMaxWindM: z.number().min(0).max(10_000_000).nullable(),
  radius34KtM: WindRadii.default(null),
  radius50KtM: WindRadii.default(null),
  radius64KtM: WindRadii,
  ringWidthFraction: z.number().min(0).max(1).nullable(),
  eyeVorticityRatio: z.number().min(0).max(1).nullable(),
  hoursInland: z.number().min(0).max(1000).nullable(),
});
export type Fix = z.infer<typeof Fix>;

/** What a check of the track found (TRACK-nn): seen, why it matters, what to do. */
export const TrackFinding = z.object({
  code: z.string().regex(/^TRACK-\d\d$/),
  /** refuse: can't be saved; consent: can't be saved until the person agrees (`sortByTime`); note: saved, shown. */
  severity: z.enum(['refuse', 'consent', 'note']),
  /** Index of the fix concerned, null for the whole track. */
  fix: z.int().nullable(),
  text: z.string(),
});
export type TrackFinding = z.infer<typeof TrackFinding>;

/** A fix after resolving: used values, and by which relation each was filled. */
export const ResolvedFix = z.object({
  time: Instant,
  latitude: z.number(),
  longitude: z.number(),
  centralPressureHpa: z.number(),
  ambientPressureHpa: z.number(),
  /** Reported maximum as a 1-min wind, null when none was given. */
  reportedMaxWindMs: z.number().nullable(),
  /** Maximum implied by the pressure with this fix's radius. */
  pressureImpliedMaxWindMs: z.number().nullable(),
  maxWindMs: z.number(),
  intensitySource: Intensity,
  radiusOfMaxWindM: z.number(),
  headingDeg: z.number(),
  speedMs: z.number(),
  hoursInland: z.number(),
  overLand: z.boolean(),
  anchor: z.enum(['mean', 'peak']),
  amplitude: z.number(),
  /** field → relation used, in words. */
  filled: z.record(z.string(), z.string()),
  flags: z.array(z.string()),
});
export type ResolvedFix = z.infer<typeof ResolvedFix>;

export const TrackResolution = z.object({
  fixes: z.array(ResolvedFix),
  findings: z.array(TrackFinding),
  /** Path with continuous longitudes (may pass ±180), one point each 30 min, [longitude, latitude]. */
  path: z.array(z.tuple([z.number(), z.number()])),
  wavenumber: z.int().nullable(),
  hemisphere: z.enum(['north', 'south']),
  maxima: z.object({
    /** Of the fix with the largest used maximum. */
    fix: z.int(),
    reportedMs: z.number().nullable(),
    pressureImpliedMs: z.number().nullable(),
    used: Intensity,
  }),
});
export type TrackResolution = z.infer<typeof TrackResolution>;

/** What the person declares about the numbers entered; nothing is saved without the averaging period. */
export const TrackDeclarations = z.object({
  windAveragingS: Averaging,
  /** Where the track comes from, in words, and its issue time when it is an advisory. */
  source: z.string().trim().max(200).default(''),
  asOf: Instant.nullable().default(null),
});

export const Track = z.object({
  fixes: z.array(Fix).min(1).max(400),
  declarations: TrackDeclarations,
  /** What radar or satellite showed of the vortices around the eye, at times within the track. */
  vortices: VortexObservations,
});
export type Track = z.infer<typeof Track>;

/** Consent to put fixes in time order; without it a track out of order isn't saved. */
const SortByTime = z.boolean().default(false);

export const ReadTrack = z.object({
  format: z.enum(['auto', 'best-track', 'track-csv']).default('auto'),
  text: z.string().min(1, 'The text is empty. Paste a best track or choose a file.').max(2_000_000),
  /** In a file of several storms, which one; the first when left out. */
  storm: z.string().max(40).optional(),
  sortByTime: SortByTime,
});
export type ReadTrack = z.infer<typeof ReadTrack>;
export const ReadTrackReply = z.object({
  format: z.enum(['best-track', 'track-csv']),
  name: z.string(),
  storms: z.array(z.string()),
  /** Null when the text doesn't say: the person must declare it. */
  windAveragingS: Averaging.nullable(),
  /** Lines the file holds / fixes read; conversions applied, with their factor. */
  conversions: z.array(z.string()),
  fixes: z.array(Fix),
  findings: z.array(TrackFinding),
});
export type ReadTrackReply = z.infer<typeof ReadTrackReply>;

export const ScenarioVersion = z.object({
  id: Id,
  scenarioId: Id,
  name: z.string(),
  number: z.int(),
  createdAt: Instant,
  createdBy: z.string(),
  digest: Digest,
  track: Track,
  resolution: TrackResolution,
  /** What the scenario was made from, when it is a variant of another; later versions may have been edited. */
  derivation: Derivation.nullable(),
  /** Set while the advisory the track is from is older than the limit, at the time of reading. */
  stale: Stale.nullable(),
  notices: z.array(Notice),
});
export type ScenarioVersion = z.infer<typeof ScenarioVersion>;

export const ScenarioSummary = z.object({
  id: Id,
  name: z.string(),
  description: z.string(),
  versionId: Id,
  version: z.int(),
  fixes: z.int(),
  hemisphere: z.enum(['north', 'south']),
  maxWindMs: z.number(),
  firstTime: Instant,
  lastTime: Instant,
  source: z.string(),
  asOf: Instant.nullable(),
  stale: Stale.nullable(),
  derivation: Derivation.nullable(),
  updatedAt: Instant,
  updatedBy: z.string(),
  path: z.array(z.tuple([z.number(), z.number()])),
});
export type ScenarioSummary = z.infer<typeof ScenarioSummary>;

export const NewScenario = z.object({
  name: z.string().trim().min(1, 'Give the scenario a name.').max(120),
  description: z.string().trim().max(500).default(''),
  track: Track,
  sortByTime: SortByTime,
});
export type NewScenario = z.infer<typeof NewScenario>;
export const NewVersion = z.object({ track: Track, basedOn: z.int(), sortByTime: SortByTime });
export type NewVersion = z.infer<typeof NewVersion>;
/** `fixes` of the reply is empty while a finding refuses the track. */
export const ResolveTrack = z.object({
  track: Track,
  intensity: Intensity.default('pressure'),
  sortByTime: SortByTime,
});
export type ResolveTrack = z.infer<typeof ResolveTrack>;

const ScenarioParams = z.object({ scenarioId: Id });

export const listScenarios = endpoint({
  id: 'listScenarios',
  method: 'get',
  path: '/scenarios',
  summary: 'Scenarios with their latest version',
  access: READERS,
  query: PageQuery,
  response: pageOf(ScenarioSummary),
  status: 200,
});
export const readTrack = endpoint({
  id: 'readTrack',
  method: 'post',
  path: '/scenarios/read',
  summary: 'Read best-track text or our track CSV without saving it',
  access: TRACK_WRITERS,
  body: ReadTrack,
  response: ReadTrackReply,
  status: 200,
});
export const resolveTrack = endpoint({
  id: 'resolveTrack',
  method: 'post',
  path: '/scenarios/resolve',
  summary: 'What the service fills in, and what it finds odd, without saving',
  access: READERS,
  body: ResolveTrack,
  response: TrackResolution,
  status: 200,
});
export const createScenario = endpoint({
  id: 'createScenario',
  method: 'post',
  path: '/scenarios',
  summary: 'Save a track as a new scenario',
  access: TRACK_WRITERS,
  idempotent: true,
  body: NewScenario,
  response: ScenarioVersion,
  status: 201,
});
export const getScenario = endpoint({
  id: 'getScenario',
  method: 'get',
  path: '/scenarios/:scenarioId',
  summary: 'Latest version of a scenario',
  access: READERS,
  params: ScenarioParams,
  response: ScenarioVersion,
  status: 200,
});
export const saveVersion = endpoint({
  id: 'saveVersion',
  method: 'post',
  path: '/scenarios/:scenarioId/versions',
  summary: 'Save the edited track as the next version; refused when someone saved one meanwhile',
  access: TRACK_WRITERS,
  idempotent: true,
  params: ScenarioParams,
  body: NewVersion,
  response: ScenarioVersion,
  status: 201,
});
