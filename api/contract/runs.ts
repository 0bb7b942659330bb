import { z } from 'zod';
import { Currency, Digest, Id, Instant, LossRange, Minor, Notice, PageQuery, pageOf } from './common.ts';
import { endpoint } from './endpoint.ts';
import { LocationQuality, Reconciliation, RowState, Terrain } from './portfolios.ts';
import { EVERY_ROLE, READERS, UNDERWRITERS } from './roles.ts';
import { Anchor, Intensity, Regime } from './scenarios.ts';
import { Stale } from './track-age.ts';
import { WindChoices } from './wind-choices.ts';

export const Purpose = z.enum(['exploratory', 'underwriting_file', 'event', 'placement']);
export type Purpose = z.infer<typeof Purpose>;

export const RunOptions = z.object({
  mesovortices: z.boolean().default(true),
  intensity: Intensity.default('pressure'),
  anchor: Anchor.default('auto'),
  /** Strengths the vortices are drawn from; mixed where there is none. */
  regime: Regime.optional(),
  /** Published relations of the wind field other than the defaults; runs stored before there was a choice have none. */
  wind: WindChoices.optional(),
  /** Gusts whose chance of being exceeded is counted per site [m/s]. */
  gustThresholdsMs: z.tuple([z.number().min(20).max(85), z.number().min(20).max(85)]).default([40, 50]),
});
export type RunOptions = z.infer<typeof RunOptions>;

export const QuoteRequest = z.object({
  editionId: Id,
  scenarioVersionIds: z.array(Id).min(1, 'Choose at least one track.').max(20),
  calibrationId: Id,
  curveSetId: Id,
  options: RunOptions,
  purpose: Purpose,
  costCentre: z.string().trim().max(64).default(''),
});
export type QuoteRequest = z.infer<typeof QuoteRequest>;

/** The price before the button: never exceeded. */
export const Quote = z.object({
  id: Id,
  number: z.string(),
  request: QuoteRequest,
  editionName: z.string(),
  scenarioNames: z.array(z.string()),
  readySites: z.int(),
  heldSites: z.int(),
  heldTivMinor: Minor,
  /** Of the values in the edition; the price has its own. */
  tivCurrency: Currency,
  scenarios: z.int(),
  siteScenarios: z.int(),
  outOfReach: z.int(),
  units: z.int(),
  /** Price of one site–scenario in currency units, as a decimal string (exact). */
  unitPrice: z.string(),
  minimumApplied: z.boolean(),
  minimumMinor: Minor,
  netMinor: Minor,
  taxLabel: z.string(),
  taxMinor: Minor,
  grossMinor: Minor,
  currency: Currency,
  tariffVersion: z.int(),
  createdAt: Instant,
  validUntil: Instant,
  state: z.enum(['open', 'accepted', 'expired']),
  /** An earlier run with identical inputs and engine, offered free. */
  identicalRunId: Id.nullable(),
  freeBalanceMinor: Minor,
  assumedTivShare: z.number(),
  warnings: z.array(z.object({ code: z.string(), text: z.string() })),
});
export type Quote = z.infer<typeof Quote>;

export const RunState = z.enum(['waiting', 'working', 'complete', 'failed', 'cancelled']);
export type RunState = z.infer<typeof RunState>;
export const ScenarioState = z.enum(['waiting', 'building', 'scoring', 'stored', 'failed', 'cancelled']);

/** Event results of one track. Ranges are 5–95 % over 264 vortex draws; null range fields when the layer is off. */
export const ScenarioResult = z.object({
  /** Within reach, those below the floor included: what is charged. */
  sitesScored: z.int(),
  outOfReach: z.int(),
  belowFloor: z.int(),
  /** Of all sites of the edition, out of reach or not. */
  tivMinor: Minor,
  /** Plain losses and means are the sums of the sites' cents; percentiles are the event's own, from 264 exact sums. */
  groundUpPlainMinor: Minor,
  grossPlainMinor: Minor,
  /** Null when the mesovortex layer is off or never acts: there is no vortex range then. */
  groundUp: LossRange.nullable(),
  gross: LossRange.nullable(),
  /** Largest over the sites, of each site's own percentile; zero when no site is within reach. */
  peakGustMs: z.object({ plain: z.number(), p5: z.number(), p50: z.number(), p95: z.number() }),
  /**
   * Sites whose plain gust, and whose own 5, 50, 95 % over draws, reach each chosen gust; TIV of those whose median does.
   * Counts of site percentiles, not percentiles of a count.
   */
  above: z.array(
    z.object({ gustMs: z.number(), plain: z.int(), p5: z.int(), p50: z.int(), p95: z.int(), tivMinor: Minor }),
  ),
  /** Sites per 5 m/s bin from 20 to 85+, enhanced median and plain. */
  histogram: z.object({ p50: z.array(z.int()), plain: z.array(z.int()) }),
  wavenumber: z.int().nullable(),
  maxima: z.object({ reportedMs: z.number().nullable(), pressureImpliedMs: z.number().nullable(), used: Intensity }),
  anchor: z.enum(['mean', 'peak', 'mixed']),
  engineNotices: z.array(z.object({ code: z.string(), text: z.string() })),
});
export type ScenarioResult = z.infer<typeof ScenarioResult>;

export const RunScenario = z.object({
  id: Id,
  scenarioVersionId: Id,
  name: z.string(),
  version: z.int(),
  /** Issue time of the advisory the track is from, and its age when the run was accepted [h]. */
  asOf: Instant.nullable(),
  ageHoursWhenRun: z.number().nullable(),
  /** Whether it was stale then, and since it is now: at the time of reading. */
  staleWhenRun: z.boolean(),
  stale: Stale.nullable(),
  state: ScenarioState,
  sitesDone: z.int(),
  sitesTotal: z.int(),
  error: z.string().nullable(),
  startedAt: Instant.nullable(),
  finishedAt: Instant.nullable(),
  restarts: z.int(),
  result: ScenarioResult.nullable(),
  path: z.array(z.tuple([z.number(), z.number()])),
  pathTimes: z.array(z.object({ time: Instant, longitude: z.number(), latitude: z.number() })),
});
export type RunScenario = z.infer<typeof RunScenario>;

export const RunSummary = z.object({
  id: Id,
  number: z.string(),
  portfolioId: Id,
  portfolioName: z.string(),
  editionId: Id,
  editionNumber: z.int(),
  scenarioNames: z.array(z.string()),
  state: RunState,
  purpose: Purpose,
  /** True when the calibration isn't signed: every output says so. */
  stamped: z.boolean(),
  scenariosDone: z.int(),
  scenariosTotal: z.int(),
  /** Of the losses: the edition's. */
  currency: Currency,
  /** Of the price. */
  priceCurrency: Currency,
  /** Of the track with the largest loss: tracks of one run are alternatives and are never added up. */
  grossPlainMinor: Minor.nullable(),
  gross: LossRange.nullable(),
  quotedMinor: Minor,
  chargedMinor: Minor.nullable(),
  acceptedAt: Instant,
  acceptedBy: z.string(),
  finishedAt: Instant.nullable(),
});
export type RunSummary = z.infer<typeof RunSummary>;

export const Run = RunSummary.extend({
  asAt: z.string().nullable(),
  options: RunOptions,
  calibration: z.object({
    id: Id,
    code: z.string(),
    version: z.int(),
    state: z.string(),
    signedBy: z.string().nullable(),
  }),
  curveSet: z.object({ id: Id, name: z.string(), version: z.int(), note: z.string() }),
  costCentre: z.string(),
  reconciliation: Reconciliation,
  assumedTivMinor: Minor,
  assumedSites: z.int(),
  engineVersion: z.string(),
  scenarios: z.array(RunScenario),
  notices: z.array(Notice),
});
export type Run = z.infer<typeof Run>;

/** Pushed over server-sent events whenever something changed; the client reads the run again or patches progress. */
export const RunEvent = z.object({
  runId: Id,
  state: RunState,
  scenarios: z.array(z.object({ id: Id, state: ScenarioState, sitesDone: z.int(), sitesTotal: z.int() })),
});
export type RunEvent = z.infer<typeof RunEvent>;

export const SiteSort = z.enum(['ref', 'tiv', 'plain', 'p50', 'p95', 'damage', 'groundUp', 'gross']);

export const SiteResult = z.object({
  siteNo: z.int(),
  siteRef: z.string(),
  label: z.string(),
  town: z.string(),
  latitude: z.number(),
  longitude: z.number(),
  state: RowState,
  locationQuality: LocationQuality,
  assumed: z.array(z.string()),
  tivMinor: Minor,
  reach: z.enum(['scored', 'out_of_reach', 'below_floor']),
  plainMs: z.number().nullable(),
  /** Mean over the draws, never below plain. */
  enhancedMeanMs: z.number().nullable(),
  p5Ms: z.number().nullable(),
  p50Ms: z.number().nullable(),
  p90Ms: z.number().nullable(),
  p95Ms: z.number().nullable(),
  p99Ms: z.number().nullable(),
  peakTime: Instant.nullable(),
  directionDeg: z.number().nullable(),
  damagePlain: z.number().nullable(),
  damageMean: z.number().nullable(),
  damageP5: z.number().nullable(),
  damageP95: z.number().nullable(),
  groundUpPlainMinor: Minor.nullable(),
  groundUpMeanMinor: Minor.nullable(),
  grossPlainMinor: Minor.nullable(),
  grossMeanMinor: Minor.nullable(),
  grossP5Minor: Minor.nullable(),
  grossP50Minor: Minor.nullable(),
  grossP95Minor: Minor.nullable(),
});
export type SiteResult = z.infer<typeof SiteResult>;

export const SitesQuery = z.object({
  sort: SiteSort.default('gross'),
  direction: z.enum(['asc', 'desc']).default('desc'),
  minGustMs: z.coerce.number().min(0).max(120).optional(),
  search: z.string().trim().max(64).optional(),
  offset: z.coerce.number().int().min(0).max(5_000_000).default(0),
  limit: z.coerce.number().int().min(1).max(500).default(100),
});
export const SitesPage = z.object({
  items: z.array(SiteResult),
  total: z.int(),
  totals: z.object({ tivMinor: Minor, groundUpMeanMinor: Minor, grossMeanMinor: Minor, grossPlainMinor: Minor }),
  largestGustMs: z.number().nullable(),
  notices: z.array(Notice),
});
export type SitesPage = z.infer<typeof SitesPage>;

/** One rung of "why this gust": factor or addition, and the wind after it. */
export const LadderStep = z.object({
  key: z.enum(['gradient', 'surface', 'motion', 'terrain', 'gust_factor', 'hills']),
  reason: z.string(),
  operation: z.enum(['start', 'times', 'plus']),
  amount: z.number(),
  afterMs: z.number(),
});
export const SiteDetail = SiteResult.extend({
  construction: z.string(),
  occupancy: z.string(),
  yearBuilt: z.int().nullable(),
  storeys: z.int().nullable(),
  terrain: z.string(),
  roughnessM: z.number().nullable(),
  fetchM: z.array(z.number()),
  deductibleMinor: Minor,
  limitMinor: Minor.nullable(),
  curve: z.string(),
  meanMs: z.number().nullable(),
  seaWindMs: z.number().nullable(),
  secondsAbove25: z.number().nullable(),
  secondsAbove33: z.number().nullable(),
  distanceToTrackKm: z.number().nullable(),
  sideOfTrack: z.enum(['left', 'right']).nullable(),
  wavenumber: z.int().nullable(),
  /** Weighted share of the 264 draws in which the site's peak reaches each of the run's chosen gusts (0–1). */
  chanceAbove: z.array(z.object({ gustMs: z.number(), chance: z.number() })),
  /**
   * Plain peak gust under this storm if the site's ground were of each class, its own marked, everything else as it is.
   * Empty at sea and out of reach.
   */
  terrainEffects: z.array(
    z.object({
      terrain: Terrain.exclude(['unknown']),
      roughnessM: z.number(),
      plainMs: z.number(),
      isPresent: z.boolean(),
    }),
  ),
  /** Empty when the site is out of reach, as is the series. */
  ladder: z.array(LadderStep),
  /** Hours around the peak, at most 400 points. */
  series: z.object({
    time: z.array(Instant),
    plain: z.array(z.number()),
    p5: z.array(z.number()),
    p50: z.array(z.number()),
    p95: z.array(z.number()),
    directionDeg: z.array(z.number()),
  }),
  notices: z.array(Notice),
});
export type SiteDetail = z.infer<typeof SiteDetail>;

export const ResultPoints = z.object({
  siteNo: z.array(z.int()),
  ref: z.array(z.string()),
  longitude: z.array(z.number()),
  latitude: z.array(z.number()),
  tivMinor: z.array(Minor),
  state: z.array(RowState),
  plainMs: z.array(z.number().nullable()),
  p5Ms: z.array(z.number().nullable()),
  p95Ms: z.array(z.number().nullable()),
});
export type ResultPoints = z.infer<typeof ResultPoints>;

/** Stored with the run; the others are worked out from its inputs when they are asked for. */
export const StoredView = z.enum(['plain', 'p50', 'p90', 'difference']);
export type StoredView = z.infer<typeof StoredView>;
export const FootprintView = z.enum([...StoredView.options, 'p99', 'draw', 'chance']);
export type FootprintView = z.infer<typeof FootprintView>;

/** Number of a draw: strength node by strength node, 24 starting phases each. */
export const DrawNumber = z.int().min(1).max(264);

export const FootprintQuery = z
  .object({
    view: FootprintView.default('p50'),
    /** Which draw, for view=draw. */
    draw: z.coerce.number().pipe(DrawNumber).optional(),
    /** Which gust [m/s], for view=chance. */
    gustMs: z.coerce.number().min(20).max(85).optional(),
  })
  .superRefine(({ view, draw, gustMs }, context) => {
    if (view === 'draw' && draw === undefined)
      context.addIssue({ code: 'custom', path: ['draw'], message: 'Say which draw: 1 to 264.' });
    if (view === 'chance' && gustMs === undefined)
      context.addIssue({ code: 'custom', path: ['gustMs'], message: 'Say which gust, 20 to 85 m/s.' });
  });
export type FootprintQuery = z.output<typeof FootprintQuery>;

/** Filled bands: `level` is the lower edge in m/s (gust), of the difference step, or of the chance (0–1). */
export const Footprint = z.object({
  view: FootprintView,
  draw: DrawNumber.nullable(),
  gustMs: z.number().nullable(),
  levels: z.array(z.number()),
  bbox: z.tuple([z.number(), z.number(), z.number(), z.number()]),
  /** The rectangle that was worked out; null when there is nothing in it. Partial: the wind may go on beyond it. */
  computed: z
    .object({ bounds: z.tuple([z.number(), z.number(), z.number(), z.number()]), isPartial: z.boolean() })
    .nullable(),
  bands: z.object({
    type: z.literal('FeatureCollection'),
    features: z.array(
      z.object({
        type: z.literal('Feature'),
        properties: z.object({ level: z.number() }),
        geometry: z.object({
          type: z.literal('MultiPolygon'),
          coordinates: z.array(z.array(z.array(z.tuple([z.number(), z.number()])))),
        }),
      }),
    ),
  }),
  definition: z.string(),
  notices: z.array(Notice),
});
export type Footprint = z.infer<typeof Footprint>;

/** Everything a run rests on, by version and digest; a re-run from it must give the same digits. */
export const RunSlip = z.object({
  run: z.string(),
  state: RunState,
  acceptedAt: Instant,
  acceptedBy: z.string(),
  finishedAt: Instant.nullable(),
  purpose: Purpose,
  edition: z.object({
    portfolio: z.string(),
    number: z.int(),
    asAt: z.string().nullable(),
    digest: Digest,
    sites: z.int(),
    held: z.int(),
  }),
  scenarios: z.array(
    z.object({
      name: z.string(),
      version: z.int(),
      digest: Digest,
      /** As declared, and what a variant was made from. */
      source: z.string(),
      asOf: Instant.nullable(),
      ageHoursWhenRun: z.number().nullable(),
      staleWhenRun: z.boolean(),
      windAveragingS: z.int(),
      conversion: z.string(),
      filled: z.array(z.string()),
      resultDigest: Digest.nullable(),
    }),
  ),
  calibration: z.object({ code: z.string(), version: z.int(), state: z.string(), digest: Digest }),
  curveSet: z.object({ name: z.string(), version: z.int(), digest: Digest }),
  options: RunOptions,
  /** Wind choices other than the defaults, in words. */
  choices: z.array(z.string()),
  draws: z.string(),
  engineVersion: z.string(),
  inputsDigest: Digest,
  quote: z.object({ number: z.string(), tariffVersion: z.int(), grossMinor: Minor, currency: Currency }),
  chargedMinor: Minor.nullable(),
  notices: z.array(Notice),
});
export type RunSlip = z.infer<typeof RunSlip>;

const QuoteParams = z.object({ quoteId: Id });
const RunParams = z.object({ runId: Id });
/** One track of a run. */
export const RunScenarioParams = z.object({ runId: Id, runScenarioId: Id });
/** One site under one track of a run. */
export const RunSiteParams = RunScenarioParams.extend({ siteNo: z.coerce.number().int().min(1) });

export const createQuote = endpoint({
  id: 'createQuote',
  method: 'post',
  path: '/quotes',
  summary: 'Price a run; free, valid for a day, pinned to its inputs',
  access: UNDERWRITERS,
  body: QuoteRequest,
  response: Quote,
  status: 201,
});
export const getQuote = endpoint({
  id: 'getQuote',
  method: 'get',
  path: '/quotes/:quoteId',
  summary: 'One quote',
  access: UNDERWRITERS,
  params: QuoteParams,
  response: Quote,
  status: 200,
});
export const acceptQuote = endpoint({
  id: 'acceptQuote',
  method: 'post',
  path: '/quotes/:quoteId/accept',
  summary: 'Accept a quote: reserves its total and starts the run',
  access: UNDERWRITERS,
  idempotent: true,
  params: QuoteParams,
  response: Run,
  status: 201,
});
export const listRuns = endpoint({
  id: 'listRuns',
  method: 'get',
  path: '/runs',
  summary: 'Runs, newest first',
  access: EVERY_ROLE,
  query: PageQuery.extend({ portfolioId: Id.optional() }),
  response: pageOf(RunSummary),
  status: 200,
});
export const getRun = endpoint({
  id: 'getRun',
  method: 'get',
  path: '/runs/:runId',
  summary: 'A run with its scenarios and event results',
  access: READERS,
  params: RunParams,
  response: Run,
  status: 200,
});
export const watchRun = endpoint({
  id: 'watchRun',
  method: 'get',
  path: '/runs/:runId/events',
  summary: 'Progress as server-sent events (RunEvent)',
  access: READERS,
  params: RunParams,
  stream: 'text/event-stream',
  response: RunEvent,
  status: 200,
});
export const cancelRun = endpoint({
  id: 'cancelRun',
  method: 'post',
  path: '/runs/:runId/cancel',
  summary: 'Cancel: finished tracks are kept and charged, the rest released',
  access: UNDERWRITERS,
  params: RunParams,
  response: Run,
  status: 200,
});
export const getRunSlip = endpoint({
  id: 'getRunSlip',
  method: 'get',
  path: '/runs/:runId/slip',
  summary: 'Run slip: every input by version and digest',
  access: READERS,
  params: RunParams,
  response: RunSlip,
  status: 200,
});
export const listSites = endpoint({
  id: 'listSites',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/sites',
  summary: 'Site results, sorted and filtered on the server',
  access: READERS,
  params: RunScenarioParams,
  query: SitesQuery,
  response: SitesPage,
  status: 200,
});
export const exportSites = endpoint({
  id: 'exportSites',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/sites.csv',
  summary: 'All site results as CSV, streamed',
  access: READERS,
  params: RunScenarioParams,
  stream: 'text/csv',
  response: z.string(),
  status: 200,
});
export const getSiteDetail = endpoint({
  id: 'getSiteDetail',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/sites/:siteNo',
  summary: 'One site: why this gust, series through the storm, damage and terms',
  access: READERS,
  params: RunSiteParams,
  response: SiteDetail,
  status: 200,
});
export const getResultPoints = endpoint({
  id: 'getResultPoints',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/points',
  summary: 'Site points for the map',
  access: READERS,
  params: RunScenarioParams,
  response: ResultPoints,
  status: 200,
});
export const getFootprint = endpoint({
  id: 'getFootprint',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/footprint',
  summary: 'Footprint as filled bands',
  access: READERS,
  params: RunScenarioParams,
  query: FootprintQuery,
  response: Footprint,
  status: 200,
});
