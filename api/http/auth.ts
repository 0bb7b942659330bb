import type { Request, RequestHandler } from 'express';
import { Passport } from 'passport';
import { Strategy } from 'passport-jwt';
import type { Identity } from '../actor.ts';
import { accessTokenOf } from './cookies.ts';

interface TokenRules {
  secret: string;
  issuer: string;
  algorithm: 'HS256';
}

/**
 * Finds out who is asking from the access cookie. A cookie that doesn't hold makes the caller a stranger;
 * whether strangers may go on is each endpoint's own question.
 */
export const signInCheck = (
  rules: TokenRules,
  identify: (claims: unknown) => Promise<Identity | null>,
): RequestHandler => {
  const passport = new Passport();
  passport.use(
    new Strategy(
      {
        jwtFromRequest: (req: Request) => accessTokenOf(req) ?? null,
        secretOrKey: rules.secret,
        issuer: rules.issuer,
        algorithms: [rules.algorithm],
      },
      (claims: unknown, done: (error: unknown, identity?: Identity | false) => void) => {
        identify(claims).then((identity) => done(null, identity ?? false), done);
      },
    ),
  );
  return (req, res, next) => {
    if (accessTokenOf(req) === undefined) {
      next();
      return;
    }
    const check = passport.authenticate('jwt', { session: false }, (error: unknown, identity: Identity | false) => {
      if (error) {
        next(error);
        return;
      }
      if (identity) req.identity = identity;
      next();
    }) as RequestHandler;
    check(req, res, next);
  };
};
