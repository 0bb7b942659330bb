import { z } from 'zod';
import { endpoint } from './endpoint.ts';
import { READERS } from './roles.ts';

/** What an observation is good for; fixed before any comparison. */
export const ObservationRole = z.enum(['P', 'Q', 'T', 'L', 'S', 'D', 'X']);
export type ObservationRole = z.infer<typeof ObservationRole>;

/** A agency, B agency's words on another site, C secondary, M memory. */
export const SourceClass = z.enum(['A', 'B', 'C', 'M']);
export type SourceClass = z.infer<typeof SourceClass>;

/** Settings of the chain the observations are compared with; the first is the default. */
export const ComparedSettings = z.enum(['default', 'relation-width', 'wind', 'wind-as-mean']);
export type ComparedSettings = z.infer<typeof ComparedSettings>;

/** Modelled at one place: peak 3-s gust, or its running maximum up to the time of comparison. */
const ModelledGust = z.object({
  plainMs: z.number(),
  p5Ms: z.number(),
  p50Ms: z.number(),
  p95Ms: z.number(),
  /** 10-min mean at the time of the plain gust. */
  meanMs: z.number(),
});

/** One observation, what is known of it, and what the chain gives there. */
export const ComparedObservation = z.object({
  id: z.string(),
  storm: z.string(),
  station: z.string(),
  latitude: z.number(),
  longitude: z.number(),
  role: ObservationRole,
  sourceClass: SourceClass,
  /** How the wind value came to us: read in a public text, or recalled. */
  how: z.enum(['found', 'memory']),
  /** Basis of the coordinates, in the gatherer's words. */
  placeBasis: z.string(),
  /** Instrument's height, null = not stated, taken as 10 m. */
  heightM: z.number().nullable(),
  heightBasis: z.string(),
  /** Averaging time of the gust, null = not stated, taken as 3 s. */
  gustAveragingS: z.number().nullable(),
  exposure: z.string(),
  /** Null = at sea. */
  roughnessLengthM: z.number().nullable(),
  gustMs: z.number().nullable(),
  /** The gust at 10 m and over 3 s in the same exposure. */
  standardisedMs: z.number().nullable(),
  sustainedMs: z.number().nullable(),
  timeUtc: z.string().nullable(),
  timeBasis: z.string(),
  compareUntilUtc: z.string().nullable(),
  source: z.string(),
  sourceUrl: z.string().nullable(),
  note: z.string(),
  modelled: z.record(ComparedSettings, ModelledGust),
});
export type ComparedObservation = z.infer<typeof ComparedObservation>;

/** A number with the range that holds 95 % of the resamples; no range below three observations. */
const Resampled = z.object({ value: z.number(), low: z.number().nullable(), high: z.number().nullable() });
export type Resampled = z.infer<typeof Resampled>;

/** How far a set of gusts is from the observed ones; shares are of the observed gust. */
export const GustErrors = z.object({
  settings: ComparedSettings,
  layer: z.enum(['plain', 'enhanced']),
  /** Peaks (role P), or running maxima (role T). */
  rows: z.enum(['peaks', 'running']),
  group: z.enum(['all', 'storm', 'source-class']),
  /** Storm or source class; empty for all. */
  name: z.string(),
  /** Whether each observation or each storm counts alike. */
  weight: z.enum(['observation', 'storm']),
  count: z.int(),
  storms: z.int(),
  bias: Resampled,
  biasMs: Resampled,
  rmseMs: Resampled,
  meanAbsolute: Resampled,
  /** Standard deviation of the relative error about the bias. */
  scatter: Resampled,
  correlation: Resampled.nullable(),
});
export type GustErrors = z.infer<typeof GustErrors>;

const Count = z.object({ settings: ComparedSettings, count: z.int(), of: z.int() });

export const Validation = z.object({
  settings: z.array(z.object({ key: ComparedSettings, title: z.string(), meaning: z.string() })),
  bootstrap: z.object({ seed: z.int(), resamples: z.int() }),
  observations: z.array(ComparedObservation),
  errors: z.array(GustErrors),
  /** Peaks whose observed gust lies within the 5th to 95th percentile over the vortex draws. */
  withinBand: z.array(Count),
  /** Lower bounds that the plain gust falls short of. */
  belowLowerBound: z.array(Count),
  /** Mean absolute relative error of the default less that of another setting, on the same resamples. */
  againstDefault: z.array(z.object({ settings: ComparedSettings, meanAbsolute: Resampled })),
  /** The same peaks under other readings of the data; plain gusts. */
  readings: z.array(
    z.object({ title: z.string(), count: z.int(), bias: z.number(), meanAbsolute: z.number(), rmseMs: z.number() }),
  ),
});
export type Validation = z.infer<typeof Validation>;

export const getValidation = endpoint({
  id: 'getValidation',
  method: 'get',
  path: '/validation',
  summary: 'Gusts of past storms against observed ones: errors with intervals, every station, the limits of the data',
  access: READERS,
  response: Validation,
  status: 200,
});
