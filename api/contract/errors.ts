import { z } from 'zod';

/** Every way a request can fail that its sender can act on. The HTTP status of each stands in http/error-handler.ts. */
export const ErrorCode = z.enum([
  'malformed_request',
  'invalid_request',
  'not_signed_in',
  'wrong_sign_in',
  'too_many_requests',
  'csrf_mismatch',
  'not_found',
  'not_allowed',
  'acceptance_required',
  'conflict',
  'idempotency_key_missing',
  'idempotency_key_reused',
  'file_too_large',
  'file_unreadable',
  'track_unreadable',
  'edition_sealed',
  'edition_not_sealed',
  'edition_not_ready',
  'seal_blocked',
  'quote_expired',
  'quote_used',
  'balance_too_low',
  'calibration_not_signed',
  'pair_unlike',
  'run_finished',
  'result_not_ready',
  'payment_declined',
  'payment_unavailable',
  'webhook_signature',
  'unavailable',
  'internal',
]);
export type ErrorCode = z.infer<typeof ErrorCode>;

/** One field or row at fault: what we saw, why it matters, what to do. */
export const Fault = z.object({
  path: z.string(),
  message: z.string(),
  code: z.string().optional(),
});
export type Fault = z.infer<typeof Fault>;

/** Problem details (RFC 9457) with our code, the request's number and every fault found. */
export const Problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  detail: z.string(),
  code: ErrorCode,
  requestId: z.string(),
  faults: z.array(Fault).default([]),
});
export type Problem = z.infer<typeof Problem>;
