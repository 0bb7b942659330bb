import { ApiError } from './api-error.ts';

/** What a notice beside the action shows of a failure. */
export const failureOf = (error: Error): { detail: string; requestId: string } => ({
  detail: error.message,
  requestId: error instanceof ApiError ? error.requestId : '',
});
