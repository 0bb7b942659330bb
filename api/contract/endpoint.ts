import type { z } from 'zod';
import type { Role } from './roles.ts';

/**
 * Who may call: anyone, anyone signed in who has accepted the standing notes, or only people holding one of the roles.
 * `signed-in` without acceptance is only for reading one's own session and accepting.
 */
export type Access = 'public' | 'session' | 'member' | readonly Role[];

type Shape = z.ZodType;

/** One HTTP operation, described once: the server mounts it, the client calls it, OpenAPI lists it. */
export interface Endpoint<
  P extends Shape = Shape,
  Q extends Shape = Shape,
  B extends Shape = Shape,
  R extends Shape = Shape,
> {
  id: string;
  method: 'get' | 'post' | 'put' | 'delete';
  /** Path under /api/v1, Express form (`/runs/:runId`). */
  path: string;
  summary: string;
  access: Access;
  /** Spends or creates something once: an Idempotency-Key header is required. */
  idempotent?: boolean;
  /** What travels when it isn't JSON. */
  upload?: 'multipart';
  stream?: 'text/csv' | 'text/event-stream';
  params?: P;
  query?: Q;
  body?: B;
  response: R;
  status: 200 | 201 | 202 | 204;
}

/** Declares an endpoint with its types kept. */
export const endpoint = <P extends Shape, Q extends Shape, B extends Shape, R extends Shape>(
  description: Endpoint<P, Q, B, R>,
): Endpoint<P, Q, B, R> => description;

export type ParamsOf<E> = E extends { params?: infer P } ? (P extends Shape ? z.output<P> : undefined) : undefined;
export type QueryOf<E> = E extends { query?: infer Q } ? (Q extends Shape ? z.output<Q> : undefined) : undefined;
export type BodyOf<E> = E extends { body?: infer B } ? (B extends Shape ? z.output<B> : undefined) : undefined;
export type ReplyOf<E> = E extends { response: infer R } ? (R extends Shape ? z.output<R> : undefined) : undefined;
