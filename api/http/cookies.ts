import type { CookieOptions, Request, Response } from 'express';

const ACCESS_COOKIE = 'gustloom_access';
const REFRESH_COOKIE = 'gustloom_refresh';
const CSRF_COOKIE = 'gustloom_csrf';
const SESSION_PATH = '/api/v1/session';

/** Sets and clears what a browser keeps of a session. Lax, because the payment page must be able to return. */
export class SessionCookies {
  private readonly base: CookieOptions;

  constructor(secure: boolean) {
    this.base = { httpOnly: true, sameSite: 'lax', secure };
  }

  set(
    res: Response,
    tokens: { accessToken: string; refreshToken: string; csrfToken: string },
    seconds: { access: number; refresh: number },
  ): void {
    res.cookie(ACCESS_COOKIE, tokens.accessToken, { ...this.base, path: '/', maxAge: seconds.access * 1000 });
    res.cookie(REFRESH_COOKIE, tokens.refreshToken, {
      ...this.base,
      path: SESSION_PATH,
      maxAge: seconds.refresh * 1000,
    });
    res.cookie(CSRF_COOKIE, tokens.csrfToken, { ...this.base, path: '/', maxAge: seconds.refresh * 1000 });
  }

  clear(res: Response): void {
    res.clearCookie(ACCESS_COOKIE, { ...this.base, path: '/' });
    res.clearCookie(REFRESH_COOKIE, { ...this.base, path: SESSION_PATH });
    res.clearCookie(CSRF_COOKIE, { ...this.base, path: '/' });
  }
}

const cookieOf = (req: Request, name: string): string | undefined => {
  const value = (req.cookies as Record<string, unknown> | undefined)?.[name];
  return typeof value === 'string' && value !== '' ? value : undefined;
};
export const accessTokenOf = (req: Request): string | undefined => cookieOf(req, ACCESS_COOKIE);
export const refreshTokenOf = (req: Request): string | undefined => cookieOf(req, REFRESH_COOKIE);
export const csrfCookieOf = (req: Request): string | undefined => cookieOf(req, CSRF_COOKIE);
