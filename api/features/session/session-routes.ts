import { Router } from 'express';
import { acceptNotes, getSession, refreshSession, signIn, signOut } from '#contract/session.ts';
import type { Identity } from '../../actor.ts';
import { AppError } from '../../errors.ts';
import { refreshTokenOf, type SessionCookies } from '../../http/cookies.ts';
import { handle, handlePublic } from '../../http/handle.ts';
import { ACCESS_SECONDS } from './access-token.ts';
import { REFRESH_DAYS, type SessionService, type SignedIn } from './session-service.ts';
import type { Request, RequestHandler, Response } from 'express';

const SECONDS = { access: ACCESS_SECONDS, refresh: REFRESH_DAYS * 24 * 3600 };

const identityOf = (req: Request): Identity => {
  if (!req.identity) throw new AppError('not_signed_in', 'Sign in to go on.');
  return req.identity;
};

/** Sign in, renew, sign out, read one's session, accept the standing notes. */
export const sessionRoutes = (sessions: SessionService, cookies: SessionCookies, limit: RequestHandler): Router => {
  const router = Router();
  const start = (res: Response, { session, accessToken, refreshToken }: SignedIn) => {
    cookies.set(res, { accessToken, refreshToken, csrfToken: session.csrfToken }, SECONDS);
    return session;
  };

  router.post(
    signIn.path,
    limit,
    handlePublic(signIn, async ({ body, res }) => start(res, await sessions.signIn(body))),
  );

  router.get(
    getSession.path,
    handle(getSession, ({ req }) => sessions.describe(identityOf(req))),
  );

  router.post(
    refreshSession.path,
    handlePublic(refreshSession, async ({ req, res }) => {
      const token = refreshTokenOf(req);
      if (token === undefined) throw new AppError('not_signed_in', 'Sign in to go on.');
      return start(res, await sessions.refresh(token));
    }),
  );

  router.delete(
    signOut.path,
    handlePublic(signOut, async ({ req, res, identity }) => {
      await sessions.signOut(identity, refreshTokenOf(req));
      cookies.clear(res);
      return null;
    }),
  );

  router.post(
    acceptNotes.path,
    handle(acceptNotes, ({ req, body }) => sessions.accept(identityOf(req), body)),
  );

  return router;
};
