import { z } from 'zod';
import { Id, Instant, Notice } from './common.ts';
import { EnsembleRequest, TrackChange } from './derivations.ts';
import { endpoint } from './endpoint.ts';
import { TRACK_WRITERS, UNDERWRITERS } from './roles.ts';

const ScenarioParams = z.object({ scenarioId: Id });

export const VariantsRequest = z
  .strictObject({
    /** The latest version when left out. */
    version: z.int().min(1).optional(),
    changes: z.array(TrackChange).min(1).max(20).optional(),
    ensemble: EnsembleRequest.optional(),
  })
  .refine(({ changes, ensemble }) => (changes === undefined) !== (ensemble === undefined), {
    path: ['changes'],
    message: 'Give either changes or an ensemble.',
  });
export type VariantsRequest = z.infer<typeof VariantsRequest>;

export const Variant = z.object({
  /** As it is, or would be, saved. */
  name: z.string(),
  change: TrackChange,
  /** Continuous longitudes, [longitude, latitude]. */
  path: z.array(z.tuple([z.number(), z.number()])),
  maxWindMs: z.number(),
  /** First crossing from sea onto land, its longitude in the path’s turn; null when there is none. */
  landfall: z.object({ time: Instant, latitude: z.number(), longitude: z.number(), maxWindMs: z.number() }).nullable(),
  /** Set when the variant was saved. */
  scenarioId: Id.nullable(),
});
export type Variant = z.infer<typeof Variant>;
export const VariantsReply = z.object({
  base: Variant,
  variants: z.array(Variant),
  notices: z.array(Notice),
});
export type VariantsReply = z.infer<typeof VariantsReply>;

export const previewVariants = endpoint({
  id: 'previewVariants',
  method: 'post',
  path: '/scenarios/:scenarioId/variants/preview',
  summary: 'Changed copies of a track, or a seeded ensemble, without saving',
  access: UNDERWRITERS,
  params: ScenarioParams,
  body: VariantsRequest,
  response: VariantsReply,
  status: 200,
});
export const saveVariants = endpoint({
  id: 'saveVariants',
  method: 'post',
  path: '/scenarios/:scenarioId/variants',
  summary: 'Save changed copies of a track, each as a scenario of its own that names what it was made from',
  access: TRACK_WRITERS,
  idempotent: true,
  params: ScenarioParams,
  body: VariantsRequest,
  response: VariantsReply,
  status: 201,
});
