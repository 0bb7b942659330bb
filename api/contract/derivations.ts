import { z } from 'zod';
import { Id } from './common.ts';

/** How a track is changed; what is left out stays. */
export const TrackChange = z.strictObject({
  /** Sideways, to the right of the motion when positive [km]. */
  offsetKm: z.number().min(-500).max(500).default(0),
  /** Turns the whole track about its first fix, clockwise when positive [deg]. */
  headingDeg: z.number().min(-60).max(60).default(0),
  /** Times the maximum wind; the pressure deficit moves with its square. */
  windFactor: z.number().min(0.5).max(1.5).default(1),
  /** Times the forward speed, from the first fix on. */
  speedFactor: z.number().min(0.4).max(2.5).default(1),
  /** Times the radius of maximum wind and every wind radius. */
  radiusFactor: z.number().min(0.4).max(2.5).default(1),
});
export type TrackChange = z.infer<typeof TrackChange>;

/** Spread of an ensemble, one standard deviation each; the members follow from the seed. */
export const EnsembleRequest = z.strictObject({
  seed: z.int().min(0).max(2_147_483_647),
  members: z.int().min(2).max(20),
  offsetKm: z.number().min(0).max(200).default(0),
  headingDeg: z.number().min(0).max(30).default(0),
  /** Of the natural logarithm of each factor. */
  windLog: z.number().min(0).max(0.3).default(0),
  speedLog: z.number().min(0).max(0.5).default(0),
  radiusLog: z.number().min(0).max(0.6).default(0),
});
export type EnsembleRequest = z.infer<typeof EnsembleRequest>;

/** What a variant was made from; kept with it and shown on every output. */
export const Derivation = z.object({
  scenarioId: Id,
  name: z.string(),
  version: z.int(),
  change: TrackChange,
  ensemble: z.object({ seed: z.int(), member: z.int(), members: z.int(), spread: EnsembleRequest }).nullable(),
});
export type Derivation = z.infer<typeof Derivation>;
