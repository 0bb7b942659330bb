import { z } from 'zod';

export const Id = z.uuid();
/** ISO 8601 in UTC, for example 2026-12-01T12:00:00.000Z. */
export const Instant = z.iso.datetime();
/** Calendar day, YYYY-MM-DD. */
export const Day = z.iso.date();
/** ISO 4217 code. */
export const Currency = z.string().regex(/^[A-Z]{3}$/);
/** Whole minor units (cents). Below 2^53, so a JSON number is exact. */
export const Minor = z.int();
export const Digest = z.string().regex(/^[0-9a-f]{64}$/);

/** 5–95 % over the 264 vortex draws, with the median and mean, in minor units. */
export const LossRange = z.object({ p5: Minor, p50: Minor, p95: Minor, mean: Minor });
export type LossRange = z.infer<typeof LossRange>;

/** A caution that travels with every number; texts and version in notices.ts. */
export const Notice = z.object({ code: z.string(), text: z.string(), version: z.string() });
export type Notice = z.infer<typeof Notice>;

/** A page of a list; `nextCursor` is null on the last one. */
export const pageOf = <T extends z.ZodType>(item: T) =>
  z.object({ items: z.array(item), nextCursor: z.string().nullable() });
export const PageQuery = z.object({
  /** Holds up to 120 characters of a name, six bytes each at worst, and an id, in base64. */
  cursor: z.string().max(1024).optional(),
  limit: z.coerce.number().int().min(1).max(500).default(50),
});
export const Nothing = z.null();
