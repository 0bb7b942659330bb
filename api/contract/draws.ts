import { z } from 'zod';
import { Currency, Minor, Notice } from './common.ts';
import { endpoint } from './endpoint.ts';
import { READERS } from './roles.ts';
import { DrawNumber, RunScenarioParams } from './runs.ts';

/** One of the 264 vortex patterns of a track, with what it does to the event. */
export const Draw = z.object({
  draw: DrawNumber,
  /** Place in the order of event gross, smallest first; draws of equal loss stand in the order of their numbers. */
  rank: z.int().min(1).max(264),
  grossMinor: Minor,
  /** Share of the weight of all draws; they sum to 1. */
  weight: z.number(),
  /** Strongest gust at any site [m/s]; null in runs stored before it was kept, as are the counts. */
  strongestMs: z.number().nullable(),
  /** Sites that reach each of the run’s chosen gusts. */
  sitesAbove: z.array(z.int()).nullable(),
  /** Strength of the vortices: node of the amplitude distribution [1]. */
  strength: z.number(),
  /** Where the pattern starts [deg of one wavelength]. */
  phaseDeg: z.number(),
});
export type Draw = z.infer<typeof Draw>;

export const Draws = z.object({
  currency: Currency,
  gustThresholdsMs: z.array(z.number()),
  /** In the order of event gross; empty where no draw differs from another. */
  draws: z.array(Draw),
  /** The draws at which the event’s gross reaches its 5, 50 and 95 %. */
  named: z.object({ p5: DrawNumber, p50: DrawNumber, p95: DrawNumber }).nullable(),
  /** Why there are none. */
  reason: z.string().nullable(),
  notices: z.array(Notice),
});
export type Draws = z.infer<typeof Draws>;

/** Sites in one draw: those where the draw changes the gust; everywhere else it is the plain gust. */
export const DrawSites = z.object({
  draw: DrawNumber,
  siteNo: z.array(z.int()),
  gustMs: z.array(z.number()),
  /** Said when there are too many sites to be worked out while somebody waits; the lists are empty then. */
  reason: z.string().nullable(),
  notices: z.array(Notice),
});
export type DrawSites = z.infer<typeof DrawSites>;

export const listDraws = endpoint({
  id: 'listDraws',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/draws',
  summary: 'The 264 vortex draws of a track in the order of event gross',
  access: READERS,
  params: RunScenarioParams,
  response: Draws,
  status: 200,
});
export const getDrawSites = endpoint({
  id: 'getDrawSites',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/draws/:draw/sites',
  summary: 'Gusts in one draw, at the sites where it differs from plain',
  access: READERS,
  params: RunScenarioParams.extend({ draw: z.coerce.number().pipe(DrawNumber) }),
  response: DrawSites,
  status: 200,
});
