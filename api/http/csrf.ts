import { timingSafeEqual } from 'node:crypto';
import type { RequestHandler } from 'express';
import { AppError } from '../errors.ts';
import { csrfCookieOf } from './cookies.ts';

const SAFE = new Set(['GET', 'HEAD', 'OPTIONS']);

const equal = (given: string | undefined, expected: string): boolean => {
  const [a, b] = [Buffer.from(given ?? ''), Buffer.from(expected)];
  return a.length === b.length && timingSafeEqual(a, b);
};

const mismatch = () =>
  new AppError('csrf_mismatch', 'This page is out of date, so nothing was changed. Load it again and repeat the step.');

/**
 * Double submit: a change by a signed-in browser carries the session's token both as cookie and as X-CSRF-Token, which
 * another site can't read. Browsers also say when another site sent a request; that is refused before sign-in, too.
 */
export const csrfCheck =
  (tokenFor: (sessionId: string) => string): RequestHandler =>
  (req, _res, next) => {
    if (SAFE.has(req.method)) {
      next();
      return;
    }
    if (req.get('Sec-Fetch-Site') === 'cross-site') throw mismatch();
    // Renewing shows nothing and changes nothing but the tokens themselves; the page that asks has no token yet.
    if (req.identity && req.path !== '/session/refresh' && !(req.method === 'POST' && req.path === '/session')) {
      const expected = tokenFor(req.identity.sessionId);
      if (!equal(req.get('X-CSRF-Token'), expected) || !equal(csrfCookieOf(req), expected)) throw mismatch();
    }
    next();
  };
