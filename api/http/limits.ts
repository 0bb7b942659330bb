import type { RequestHandler } from 'express';
import { rateLimit } from 'express-rate-limit';
import { AppError } from '../errors.ts';

export interface Limit {
  windowMs: number;
  requests: number;
}
export interface Limits {
  /** Every call of the API from one address. */
  all: Limit;
  /** Failed sign-ins from one address; the lock per person comes on top. */
  signIn: Limit;
  /** Work done at once for the caller and stored nowhere. */
  compute: Limit;
  /** Pictures and gusts of single draws: a person steps through them, two calls a step. */
  draws: Limit;
}

export const DEFAULT_LIMITS: Limits = {
  all: { windowMs: 60_000, requests: 1200 },
  signIn: { windowMs: 15 * 60_000, requests: 30 },
  compute: { windowMs: 60_000, requests: 60 },
  draws: { windowMs: 60_000, requests: 240 },
};

const WRONG_SIGN_IN = 401;

const limiter = ({ windowMs, requests }: Limit, message: string, onlyFailures: boolean): RequestHandler =>
  rateLimit({
    windowMs,
    limit: requests,
    standardHeaders: 'draft-7',
    legacyHeaders: false,
    skipSuccessfulRequests: onlyFailures,
    // A database that is away is nobody's wrong guess.
    requestWasSuccessful: (_req, res) => res.statusCode !== WRONG_SIGN_IN,
    handler: (req) => {
      const info = (req as typeof req & { rateLimit?: { resetTime?: Date } }).rateLimit;
      const resetAt = info?.resetTime?.getTime() ?? Date.now() + windowMs;
      throw new AppError('too_many_requests', message, { retryAfterS: Math.max(1, (resetAt - Date.now()) / 1000) });
    },
  });

export const limitAll = (limits: Limits): RequestHandler =>
  limiter(limits.all, 'Too many requests from your address. Wait a moment, then go on.', false);
export const limitSignIn = (limits: Limits): RequestHandler =>
  limiter(
    limits.signIn,
    'Too many failed sign-ins from your address. Wait a quarter of an hour, then try again.',
    true,
  );
export const limitCompute = (limits: Limits): RequestHandler =>
  limiter(limits.compute, 'Too many calculations at once. Wait a minute, then go on.', false);
export const limitDraws = (limits: Limits): RequestHandler =>
  limiter(limits.draws, 'Too many draws in one minute. Wait a moment, then go on.', false);
