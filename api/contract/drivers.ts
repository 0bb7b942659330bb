import { z } from 'zod';
import { endpoint } from './endpoint.ts';
import { READERS } from './roles.ts';
import { RunScenarioParams, RunSiteParams } from './runs.ts';
import { SpreadReply } from './studies.ts';

/** What the eyewall ring and its vortices do to a result of a run, each setting changed alone. */
export const Drivers = SpreadReply.pick({
  engineVersion: true,
  sites: true,
  currency: true,
  curve: true,
  base: true,
  rows: true,
  notices: true,
}).extend({
  /** The ring in use: the same at every fix, or from the least to the most. */
  ring: z.object({
    width: z.tuple([z.number(), z.number()]),
    eyeRatio: z.tuple([z.number(), z.number()]),
  }),
  mesovortices: z.boolean(),
});
export type Drivers = z.infer<typeof Drivers>;

export const getDrivers = endpoint({
  id: 'getDrivers',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/drivers',
  summary: 'What ring width, eye ratio, anchor, regime and vortices do to the 200 largest losses; free, stored nowhere',
  access: READERS,
  params: RunScenarioParams,
  response: Drivers,
  status: 200,
});
export const getSiteDrivers = endpoint({
  id: 'getSiteDrivers',
  method: 'get',
  path: '/runs/:runId/scenarios/:runScenarioId/sites/:siteNo/drivers',
  summary: 'What ring width, eye ratio, anchor, regime and vortices do at one site; free, stored nowhere',
  access: READERS,
  params: RunSiteParams,
  response: Drivers,
  status: 200,
});
