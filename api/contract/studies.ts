import { z } from 'zod';
import { Currency, Id, Instant, Minor, Notice } from './common.ts';
import { endpoint } from './endpoint.ts';
import { EvaluationSite, MOST_EVALUATED_SITES } from './evaluations.ts';
import { UNDERWRITERS } from './roles.ts';
import { Anchor, Intensity, Regime } from './scenarios.ts';
import { WindChoices } from './wind-choices.ts';

/** Everything about the chain that a person may set, around which one switch at a time is tried. */
export const ChainSettings = z.strictObject({
  intensity: Intensity.default('pressure'),
  anchor: Anchor.default('auto'),
  mesovortices: z.boolean().default(true),
  regime: Regime.default('mixed'),
  wind: WindChoices.prefault({}),
});
export type ChainSettings = z.infer<typeof ChainSettings>;

const ScenarioParams = z.object({ scenarioId: Id });
/** The latest version when left out. */
const Version = z.int().min(1).optional();

/** Strongest gust at any of the sites: plain, and 5, 50, 95 % over the draws of the event [m/s]. */
const GustRange = z.object({ plain: z.number(), p5: z.number(), p50: z.number(), p95: z.number() });
const Money = z.object({ plain: Minor, p5: Minor, p50: Minor, p95: Minor, mean: Minor });

/** Sites come from an edition (the largest values within reach) or with the request; not both. */
export const SpreadRequest = z
  .strictObject({
    version: Version,
    editionId: Id.optional(),
    sites: z.array(EvaluationSite).min(1).max(MOST_EVALUATED_SITES).optional(),
    curveSetId: Id.optional(),
    settings: ChainSettings.prefault({}),
    /** Every switch, or those of the eyewall ring alone, which take a few seconds. */
    switches: z.enum(['all', 'ring']).default('all'),
  })
  .refine(({ editionId, sites }) => (editionId === undefined) !== (sites === undefined), {
    path: ['editionId'],
    message: 'Give either an edition or a list of sites.',
  });
export type SpreadRequest = z.infer<typeof SpreadRequest>;

/** One switch tried alone; `choice` names a wind choice or a setting of the chain. */
export const SpreadRow = z.object({
  choice: z.string(),
  title: z.string(),
  from: z.object({ value: z.string(), title: z.string() }),
  to: z.object({ value: z.string(), title: z.string(), source: z.string() }),
  peakGustMs: GustRange.nullable(),
  /** Change of the centre (the median over draws; plain where the layer is off). */
  peakGustChangeMs: z.number().nullable(),
  grossMinor: Money.nullable(),
  grossChangeMinor: Minor.nullable(),
  /** Why a switch has no effect here, or why it can’t be computed; null when it changes something. */
  reason: z.string().nullable(),
});
export type SpreadRow = z.infer<typeof SpreadRow>;

export const SpreadReply = z.object({
  engineVersion: z.string(),
  scenario: z.object({ id: Id, name: z.string(), version: z.int() }),
  settings: ChainSettings,
  sites: z.object({ used: z.int(), of: z.int(), rule: z.string() }),
  /** Null when the sites came without an edition. */
  currency: Currency.nullable(),
  curve: z.string(),
  base: z.object({
    peakGustMs: GustRange,
    strongestSite: z.string(),
    grossMinor: Money.nullable(),
  }),
  /** Widest change of the event’s gross first, then of the peak gust; those without effect last. */
  rows: z.array(SpreadRow),
  /** Both readings of the strongest fix. */
  intensity: z.object({
    fix: z.int(),
    centralPressureHpa: z.number(),
    pressure: z.object({ maxWindMs: z.number(), radiusOfMaxWindM: z.number(), shapeB: z.number() }).nullable(),
    wind: z.object({ maxWindMs: z.number(), radiusOfMaxWindM: z.number(), shapeB: z.number() }).nullable(),
    /** B of the relation, beside which the B of the reported wind is judged. */
    relationB: z.number(),
    differ: z.boolean(),
  }),
  notices: z.array(Notice),
});
export type SpreadReply = z.infer<typeof SpreadReply>;

export const spread = endpoint({
  id: 'spread',
  method: 'post',
  path: '/scenarios/:scenarioId/spread',
  summary: 'What each setting does, changed alone, at up to 200 sites; free, exploratory, stored nowhere',
  access: UNDERWRITERS,
  params: ScenarioParams,
  body: SpreadRequest,
  response: SpreadReply,
  status: 200,
});

/** Most points along one side of the picture. */
export const MOST_FIELD_POINTS = 121;

export const WindFieldRequest = z.strictObject({
  version: Version,
  /** Between the first and the last fix. */
  time: Instant,
  settings: ChainSettings.prefault({}),
  /** Half the side of the picture [m]. */
  halfWidthM: z.number().min(20_000).max(600_000).default(200_000),
  /** Points along one side; odd, so that one is the centre. */
  points: z
    .int()
    .min(11)
    .max(MOST_FIELD_POINTS)
    .refine((n) => n % 2 === 1, 'Give an odd number.')
    .default(81),
});
export type WindFieldRequest = z.infer<typeof WindFieldRequest>;

export const WindFieldReply = z.object({
  engineVersion: z.string(),
  scenario: z.object({ id: Id, name: z.string(), version: z.int() }),
  firstTime: Instant,
  lastTime: Instant,
  time: Instant,
  settings: ChainSettings,
  state: z.object({
    latitude: z.number(),
    longitude: z.number(),
    headingDeg: z.number(),
    translationMs: z.number(),
    hemisphere: z.enum(['north', 'south']),
    maxWindMs: z.number(),
    radiusOfMaxWindM: z.number(),
    shapeB: z.number(),
    pressureDeficitPa: z.number(),
    hoursInland: z.number(),
  }),
  /** Over open sea, along rays to the right and left of the motion, ahead and astern, and the mean around the circle. */
  profile: z.object({
    radiusM: z.array(z.number()),
    gradientMs: z.array(z.number()),
    meanMs: z.array(z.number()),
    rightMs: z.array(z.number()),
    leftMs: z.array(z.number()),
    aheadMs: z.array(z.number()),
    asternMs: z.array(z.number()),
  }),
  /** Rows from north to south, points from west to east, square in metres about the centre. */
  field: z.object({
    halfWidthM: z.number(),
    points: z.int(),
    /** 10-min wind at 10 m over open sea [m/s], direction it comes FROM [deg], 3-s gust over open sea [m/s]. */
    seaWindMs: z.array(z.number()),
    directionDeg: z.array(z.number()),
    gustMs: z.array(z.number()),
  }),
  notices: z.array(Notice),
});
export type WindFieldReply = z.infer<typeof WindFieldReply>;

export const windField = endpoint({
  id: 'windField',
  method: 'post',
  path: '/scenarios/:scenarioId/wind-field',
  summary: 'Radial profile and wind field over open sea at one time of a track; stored nowhere',
  access: UNDERWRITERS,
  params: ScenarioParams,
  body: WindFieldRequest,
  response: WindFieldReply,
  status: 200,
});
