import { z } from 'zod';
import { Digest, Id, Instant } from './common.ts';
import { endpoint } from './endpoint.ts';
import { MODELERS, READERS } from './roles.ts';
import { Anchor, Intensity } from './scenarios.ts';

/** A damage curve as data, with the gust it expects. */
export const DamageCurve = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('emanuel'),
    code: z.string(),
    name: z.string(),
    thresholdMs: z.number().positive(),
    halfMs: z.number().positive(),
    gustBasis: z.object({ averagingS: z.literal(3), heightM: z.literal(10), exposure: z.literal('as found') }),
    fittedOn: z.enum(['plain', 'enhanced']),
    source: z.string(),
    version: z.string(),
  }),
  z.object({
    kind: z.literal('points'),
    code: z.string(),
    name: z.string(),
    speedsMs: z.array(z.number().nonnegative()).min(2),
    ratios: z.array(z.number().min(0).max(1)).min(2),
    gustBasis: z.object({ averagingS: z.literal(3), heightM: z.literal(10), exposure: z.literal('as found') }),
    fittedOn: z.enum(['plain', 'enhanced']),
    source: z.string(),
    version: z.string(),
  }),
]);
export type DamageCurve = z.infer<typeof DamageCurve>;

export const CurveSet = z.object({
  id: Id,
  name: z.string(),
  version: z.int(),
  state: z.enum(['draft', 'approved']),
  note: z.string(),
  curve: DamageCurve,
  digest: Digest,
});
export type CurveSet = z.infer<typeof CurveSet>;

/** Settings that a signed calibration fixes; the run's own options may differ and are then marked. */
export const CalibrationSettings = z.object({
  intensity: Intensity,
  anchor: Anchor,
  ringWidthFraction: z.number(),
  eyeVorticityRatio: z.number(),
});
export type CalibrationSettings = z.infer<typeof CalibrationSettings>;

export const Calibration = z.object({
  id: Id,
  code: z.string(),
  version: z.int(),
  state: z.enum(['draft', 'submitted', 'signed', 'withdrawn']),
  note: z.string(),
  settings: CalibrationSettings,
  curveSetId: Id,
  signedBy: z.string().nullable(),
  signedAt: Instant.nullable(),
  digest: Digest,
});
export type Calibration = z.infer<typeof Calibration>;

export const listCurveSets = endpoint({
  id: 'listCurveSets',
  method: 'get',
  path: '/curve-sets',
  summary: 'Damage curve sets',
  access: READERS,
  response: z.object({ items: z.array(CurveSet) }),
  status: 200,
});
export const listCalibrations = endpoint({
  id: 'listCalibrations',
  method: 'get',
  path: '/calibrations',
  summary: 'Calibrations',
  access: READERS,
  response: z.object({ items: z.array(Calibration) }),
  status: 200,
});

const ringShare = (name: string, least: number, most: number) =>
  z.number().refine((value) => value >= least && value <= most, {
    error: ({ input }) => `${name} is ${String(input)}. Give ${least} to ${most}.`,
  });

/** A ring for a draft; everything else stays as in the version it is based on. */
export const CalibrationDraft = z.strictObject({
  basedOnId: Id,
  ringWidthFraction: ringShare('The ring width over the radius of maximum wind', 0.1, 0.45),
  eyeVorticityRatio: ringShare('The eye’s vorticity over the average', 0, 0.9),
  note: z.string().trim().min(1, 'Say why, in a few words.').max(500),
});
export type CalibrationDraft = z.infer<typeof CalibrationDraft>;
export const draftCalibration = endpoint({
  id: 'draftCalibration',
  method: 'post',
  path: '/calibrations',
  summary: 'Draft the next version of a calibration with another ring; a run on it is stamped until it is signed',
  access: MODELERS,
  idempotent: true,
  body: CalibrationDraft,
  response: Calibration,
  status: 201,
});
