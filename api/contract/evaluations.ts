import { z } from 'zod';
import { Instant } from './common.ts';
import { endpoint } from './endpoint.ts';
import { VortexObservations } from './observed-vortices.ts';
import { Anchor, Averaging, Intensity, Regime } from './scenarios.ts';
import { WindChoices } from './wind-choices.ts';

/** Greatest number of sites in one evaluation. */
export const MOST_EVALUATED_SITES = 200;

const missing = <T extends z.ZodType>(schema: T) => schema.nullish().transform((value) => value ?? null);
const between = (least: number, most: number, unit: string) =>
  z.number().min(least, `Give ${least} to ${most}${unit}.`).max(most, `Give ${least} to ${most}${unit}.`);
const metres = z.number().min(0, 'A distance can’t be negative.').max(1e7, 'Give metres, at most 10,000 km.');
const radii = z.tuple([metres, metres, metres, metres], 'Give four radii: NE, SE, SW, NW.');
const money = z.number().min(0, 'An amount can’t be negative.').max(1e15, 'The amount is too large to add up exactly.');

/** A fix of the track; left-out fields are filled by the relations named in the reply. */
export const EvaluationFix = z.strictObject({
  time: Instant,
  latitude: between(-80, 80, ' degrees'),
  longitude: between(-180, 360, ' degrees'),
  centralPressureHpa: missing(between(800, 1040, ' hPa')),
  ambientPressureHpa: missing(between(900, 1060, ' hPa')),
  maxWindMs: missing(between(0, 120, ' m/s')),
  /** Averaging period of maxWindMs; 60 when left out, and then a notice says so. */
  windAveragingSeconds: missing(
    z.literal(
      Averaging.options.map(({ value }) => value),
      'The averaging period must be 60, 120, 180 or 600 s.',
    ),
  ),
  radiusOfMaxWindM: missing(between(2000, 2_000_000, ' m')),
  /** Reach of 34, 50 and 64-kt wind in the quadrants NE, SE, SW, NW; 0 = none. */
  radius34KtM: missing(radii),
  radius50KtM: missing(radii),
  /** By default used only where the radius of maximum wind is missing. */
  radius64KtM: missing(radii),
  ringWidthFraction: missing(between(0.05, 1, '')),
  eyeVorticityRatio: missing(between(0, 1, '')),
  /** Hours since the centre last crossed from sea onto land; left out at every fix, they come from the land polygons. */
  hoursInland: missing(between(0, 1000, ' h')),
});

/** A hill that stands out from the land upwind, and where on it the site lies. */
export const Hill = z.strictObject({
  shape: z.enum(['ridge', 'escarpment', 'hill'], 'Available: ridge, escarpment, hill.'),
  /** Of the crest above the land upwind. */
  heightM: between(0, 3000, ' m'),
  /** From the crest upwind to where the ground is half as high. */
  halfLengthM: between(1, 20_000, ' m'),
  /** From the crest: negative upwind, positive downwind. */
  distanceM: between(-50_000, 50_000, ' m'),
  /** Of ASCE 7: suburban B, open C, flat with water upwind D. */
  exposure: z.enum(['B', 'C', 'D'], 'Available: B, C, D.'),
});

const SiteFields = z.strictObject({
  siteRef: z.string().trim().min(1, 'Give the site a reference.').max(120),
  latitude: between(-90, 90, ' degrees'),
  longitude: between(-180, 360, ' degrees'),
  /** Null = at sea. Left out = 0.03 m on land and at sea outside the land polygons. */
  roughnessLengthM: z
    .number()
    .gt(0, 'A roughness length is above 0 m; use null for a site at sea.')
    .max(5, 'A roughness length is at most 5 m.')
    .nullish(),
  /** Overland distance to the coast for wind FROM 0, 45, ..., 315 degrees; left out, it comes from the land polygons. */
  fetchM: missing(z.array(metres).length(8, 'Give eight distances: wind from 0, 45, ..., 315 degrees.')),
  /** Speed-up of the gust by a hill; this or the hill itself, not both. */
  topographicFactor: missing(between(0.5, 3, '')),
  hill: missing(Hill),
  /** Left out = no loss asked. */
  value: missing(money),
  deductible: missing(money),
  /** Most paid above the deductible; left out = none. */
  limit: missing(money),
});

export const EvaluationSite = SiteFields.superRefine(
  ({ topographicFactor, hill }, context) => {
    if ((topographicFactor ?? null) === null || (hill ?? null) === null) return;
    const message = 'Give a topographic factor or a hill, not both.';
    context.addIssue({ code: 'custom', path: ['hill'], message });
  },
  // Also when other fields are at fault, so that one answer names everything.
  { when: ({ value }) => typeof value === 'object' && value !== null },
);

/** Every choice of the chain; what is left out takes its default. */
export const EvaluationOptions = z.strictObject({
  intensity: Intensity.default('pressure'),
  anchor: Anchor.default('auto'),
  mesovortices: z.boolean().default(true),
  regime: Regime.default('mixed'),
  timeStepS: between(5, 3600, ' s').default(300),
  innerTimeStepS: between(5, 3600, ' s').default(60),
  ...WindChoices.shape,
});

/** The objects of a list that may not have passed its own checks. */
const partsOf = (list: unknown): Record<string, unknown>[] =>
  Array.isArray(list)
    ? list.map((part: unknown) => (typeof part === 'object' && part !== null ? { ...part } : {}))
    : [];

export const EvaluationRequest = z
  .strictObject({
    track: z
      .array(EvaluationFix)
      .min(2, 'A track needs at least two fixes.')
      .max(400, 'A track has at most 400 fixes.'),
    sites: z
      .array(EvaluationSite)
      .min(1, 'Give at least one site.')
      .max(MOST_EVALUATED_SITES, `At most ${MOST_EVALUATED_SITES} sites at once; use a portfolio for more.`),
    options: EvaluationOptions.prefault({}),
    /** What radar or satellite showed of the vortices around the eye, at times within the track. */
    vortexObservations: VortexObservations,
  })
  .superRefine(
    (request, context) => {
      const fault = (path: PropertyKey[], message: string) => context.addIssue({ code: 'custom', path, message });
      partsOf(request.track).forEach((fix, i, track) => {
        const before = track[i - 1];
        if (before && Date.parse(String(fix.time)) <= Date.parse(String(before.time))) {
          fault(['track', i, 'time'], 'Times must increase: this one isn’t later than that of the fix before.');
        }
        if ((fix.centralPressureHpa ?? null) === null && (fix.maxWindMs ?? null) === null) {
          fault(['track', i, 'centralPressureHpa'], 'Give a central pressure or a maximum wind.');
          fault(['track', i, 'maxWindMs'], 'Give a central pressure or a maximum wind.');
        }
      });
      const times = partsOf(request.track).map(({ time }) => Date.parse(String(time)));
      partsOf(request.vortexObservations).forEach(({ time }, i) => {
        const at = Date.parse(String(time));
        if (at >= times[0]! && at <= times.at(-1)!) return;
        fault(['vortexObservations', i, 'time'], 'Give a time within the track.');
      });
      const seen = new Set<unknown>();
      partsOf(request.sites).forEach(({ siteRef }, i) => {
        if (siteRef !== undefined && seen.has(siteRef)) fault(['sites', i, 'siteRef'], 'This reference is used twice.');
        seen.add(siteRef);
      });
    },
    // Also when single fields are at fault, so that one answer names everything.
    { when: ({ value }) => typeof value === 'object' && value !== null },
  );
export type EvaluationRequest = z.infer<typeof EvaluationRequest>;
/** The request as sent, before defaults are filled in. */
export type EvaluationBody = z.input<typeof EvaluationRequest>;

/** A fix as the chain used it. */
export const EvaluatedFix = z.object({
  time: Instant,
  latitude: z.number(),
  longitude: z.number(),
  centralPressureHpa: z.number(),
  ambientPressureHpa: z.number(),
  /** Reported maximum as a 1-min wind, null when none was given. */
  reportedMaxWindMs: z.number().nullable(),
  /** 1-min maximum the pressure implies, null when no pressure was given. */
  pressureImpliedMaxWindMs: z.number().nullable(),
  /** 1-min maximum in use. */
  maxWindMs: z.number(),
  /** The same after dividing out vortex peaks where anchored "peak". */
  anchoredMaxWindMs: z.number(),
  axisymmetricMaxWindMs: z.number(),
  intensitySource: Intensity,
  radiusOfMaxWindM: z.number(),
  shapeB: z.number(),
  ringWidthFraction: z.number(),
  eyeVorticityRatio: z.number(),
  hoursInland: z.number(),
  translationMs: z.number(),
  headingDeg: z.number(),
  /** field → relation used. */
  filled: z.record(z.string(), z.string()),
  anchor: z.enum(['mean', 'peak']),
  amplitude: z.number(),
  patternRadPerS: z.number().nullable(),
  flags: z.array(z.string()),
});

export const EvaluatedSite = z.object({
  siteRef: z.string(),
  reach: z.enum(['scored', 'below-floor', 'out-of-reach']),
  /** What was assumed about the ground, by field. */
  filled: z.record(z.string(), z.string()),
  /** At the plain peak; null out of reach. meanMs: 10-min with terrain, without hills; seaWindMs: 10-min over open sea. */
  plain: z
    .object({
      gustMs: z.number(),
      meanMs: z.number(),
      seaWindMs: z.number(),
      /** Wind FROM, clockwise from north. */
      directionDeg: z.number(),
      time: Instant,
      secondsAbove25Ms: z.number(),
      secondsAbove33Ms: z.number(),
    })
    .nullable(),
  /** Over the 264 draws; the spread of one effect, not a prediction interval. */
  enhanced: z
    .object({
      meanMs: z.number(),
      p5Ms: z.number(),
      p50Ms: z.number(),
      p90Ms: z.number(),
      p95Ms: z.number(),
      p99Ms: z.number(),
    })
    .nullable(),
  /** Null when the site has no value or is out of reach. */
  loss: z
    .object({
      groundUpPlain: z.number(),
      grossPlain: z.number(),
      groundUpMean: z.number(),
      grossMean: z.number(),
    })
    .nullable(),
});

export const EvaluationReply = z.object({
  engineVersion: z.string(),
  notices: z.array(z.object({ code: z.string(), text: z.string() })),
  storm: z.object({ wavenumber: z.int().nullable(), fixes: z.array(EvaluatedFix) }),
  sites: z.array(EvaluatedSite),
  /** Null when no site has a value. */
  event: z
    .object({
      grossPlain: z.number(),
      grossMean: z.number(),
      grossP5: z.number(),
      grossP50: z.number(),
      grossP95: z.number(),
    })
    .nullable(),
});
export type EvaluationReply = z.infer<typeof EvaluationReply>;

export const evaluate = endpoint({
  id: 'evaluate',
  method: 'post',
  path: '/evaluations',
  summary: 'Gusts and losses of at most 200 sites under a track; free, exploratory, stored nowhere',
  access: 'member',
  body: EvaluationRequest,
  response: EvaluationReply,
  status: 200,
});
