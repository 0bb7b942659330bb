import { z } from 'zod';
import { Id, Notice } from './common.ts';
import { endpoint } from './endpoint.ts';
import { UNDERWRITERS } from './roles.ts';
import { ScenarioVersion } from './scenarios.ts';

/** A number within bounds; the fault names the quantity, what was seen, and the range. */
const within = (name: string, least: number, most: number, unit: string) => {
  const range = `${least} to ${most}${unit}`;
  return z
    .number({ error: ({ input }) => `${name} is ${input === undefined ? 'missing' : String(input)}. Give ${range}.` })
    .refine((value) => value >= least && value <= most, {
      error: ({ input }) => `${name} is ${String(input)}. Give ${range}.`,
    });
};

/** An eyewall ring; `maxWindMs` is the axisymmetric 1-min maximum. Widths and eye ratios are clamped to the solver’s range. */
export const RingRequest = z.strictObject({
  maxWindMs: within('The maximum wind', 10, 120, ' m/s'),
  radiusOfMaxWindM: within('The radius of maximum wind', 2_000, 200_000, ' m'),
  ringWidthFraction: within('The ring width', 0.05, 1, ' of the radius of maximum wind').default(0.35),
  eyeVorticityRatio: within('The eye’s vorticity over the average', 0, 1, '').default(0.2),
  hoursInland: within('The time inland', 0, 1000, ' h').default(0),
});
export type RingRequest = z.infer<typeof RingRequest>;

export const RingReply = z.object({
  engineVersion: z.string(),
  wavenumber: z.int().nullable(),
  /** What people call the shape a ring of that many vortices shows. */
  polygon: z.string().nullable(),
  amplitude: z.number(),
  switch: z.number(),
  averageVorticityPerS: z.number(),
  eyeVorticityPerS: z.number(),
  ringVorticityPerS: z.number(),
  growthPerS: z.number().nullable(),
  eFoldS: z.number().nullable(),
  patternRadPerS: z.number().nullable(),
  patternPeriodS: z.number().nullable(),
  passIntervalS: z.number().nullable(),
  lifetimeS: z.number(),
  orbitRadiusM: z.number(),
  coreRadiusM: z.number().nullable(),
  circulationM2PerS: z.number().nullable(),
  /** Smooth ring, m = 3 to 12; growth 0 and pattern null below the floor. */
  modes: z.array(z.object({ m: z.int(), growthPerS: z.number(), patternRadPerS: z.number().nullable() })),
  /** Sharp ring, m = 1 to 12, with each edge wave alone and how they lock. */
  sharpModes: z.array(
    z.object({
      m: z.int(),
      growthPerS: z.number(),
      /** One value when the edges lock; a pair, larger first, when each goes its own way. */
      frequencyRadPerS: z.union([z.number(), z.tuple([z.number(), z.number()])]),
      phaseLagDeg: z.number().nullable(),
      amplitudeRatio: z.number().nullable(),
      /** Angular velocity of each edge's wave alone, and of the flow there. */
      innerWaveRadPerS: z.number(),
      outerWaveRadPerS: z.number(),
      innerFlowRadPerS: z.number(),
      outerFlowRadPerS: z.number(),
      locked: z.boolean(),
    }),
  ),
  /** The ring’s own flow: distance, vorticity and wind. */
  profile: z.object({
    radiusM: z.array(z.number()),
    vorticityPerS: z.array(z.number()),
    windMs: z.array(z.number()),
  }),
  notices: z.array(Notice),
});
export type RingReply = z.infer<typeof RingReply>;

export const ring = endpoint({
  id: 'ring',
  method: 'post',
  path: '/rings',
  summary: 'Stability of an eyewall ring: which polygon it prefers, how fast it grows and turns; stored nowhere',
  access: UNDERWRITERS,
  body: RingRequest,
  response: RingReply,
  status: 200,
});

/** Growth of the fastest wave over a grid of ring widths and eye ratios, in units of the average vorticity. */
export const StabilityMap = z.object({
  engineVersion: z.string(),
  widthFraction: z.array(z.number()),
  eyeRatio: z.array(z.number()),
  /** Rows by eye ratio, columns by width; 0 and null where no wave grows. */
  growth: z.array(z.array(z.number())),
  wavenumber: z.array(z.array(z.int().nullable())),
  amplitude: z.array(z.array(z.number())),
});
export type StabilityMap = z.infer<typeof StabilityMap>;
export const stabilityMap = endpoint({
  id: 'stabilityMap',
  method: 'get',
  path: '/rings/stability-map',
  summary: 'Where rings break up, and into how many vortices',
  access: UNDERWRITERS,
  response: StabilityMap,
  status: 200,
});

/** How a breakdown is computed. */
export const BreakdownRequest = RingRequest.omit({ hoursInland: true }).extend({
  maxWindMs: within('The maximum wind', 10, 110, ' m/s'),
  ringWidthFraction: within('The ring width', 0.1, 0.45, ' of the radius of maximum wind').default(0.35),
  eyeVorticityRatio: within('The eye’s vorticity over the average', 0, 0.9, '').default(0.2),
  points: z.union([z.literal(64), z.literal(96), z.literal(128), z.literal(192), z.literal(256)]).default(128),
  durationS: within('The duration', 600, 48 * 3600, ' s').default(6 * 3600),
  frameStepS: within('The time between frames', 60, 6 * 3600, ' s').default(1800),
  disturbance: within('The disturbance', 0.0001, 0.2, ' of the ring’s vorticity').default(0.01),
  seed: z.int().min(0).max(4_294_967_295).default(1),
  /** Time over which the ring is rebuilt, as heating does; null = left alone. */
  relaxationS: within('The relaxation time', 600, 1_000_000, ' s').nullable().default(null),
  /** Vorticity of every frame, too; only with at most 25 frames and 128 points. */
  frames: z.boolean().default(false),
});
export type BreakdownRequest = z.infer<typeof BreakdownRequest>;
export const BreakdownReply = z.object({
  engineVersion: z.string(),
  setup: BreakdownRequest,
  sideM: z.number(),
  frames: z.array(
    z.object({
      timeS: z.number(),
      maxWindMs: z.number(),
      meanMaxWindMs: z.number(),
      radiusOfMeanMaxM: z.number(),
      minPressurePa: z.number(),
      vortices: z.int(),
      energyShare: z.number(),
      enstrophyShare: z.number(),
      circulationResidual: z.number(),
      /** Rows from the bottom up, anticlockwise flow; empty unless asked for. */
      vorticityPerS: z.array(z.number()),
    }),
  ),
  notices: z.array(Notice),
});
export type BreakdownReply = z.infer<typeof BreakdownReply>;
export const breakdown = endpoint({
  id: 'breakdown',
  method: 'post',
  path: '/rings/breakdown',
  summary: 'How a ring breaks down in a two-dimensional model: frames, winds, conservation residuals; stored nowhere',
  access: UNDERWRITERS,
  body: BreakdownRequest,
  response: BreakdownReply,
  status: 200,
});

/** Sets a ring at every fix of a track, as the next version. */
export const RingToScenario = z.strictObject({
  basedOn: z.int(),
  ringWidthFraction: within('The ring width', 0.1, 0.45, ' of the radius of maximum wind'),
  eyeVorticityRatio: within('The eye’s vorticity over the average', 0, 0.9, ''),
});
export type RingToScenario = z.infer<typeof RingToScenario>;
export const setRing = endpoint({
  id: 'setRing',
  method: 'post',
  path: '/scenarios/:scenarioId/ring',
  summary: 'Save a ring at every fix of a scenario, as its next version',
  access: UNDERWRITERS,
  idempotent: true,
  params: z.object({ scenarioId: Id }),
  body: RingToScenario,
  response: ScenarioVersion,
  status: 201,
});
