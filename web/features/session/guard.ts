import { redirect } from 'react-router-dom';
import type { Session } from '#contract/session.ts';
import type { Role } from '#contract/roles.ts';
import { ApiError, notForRole } from '../../api/api-error.ts';
import { paths } from '../../paths.ts';
import { queryClient } from '../../query-client.ts';
import { holdsOneOf, sessionQuery } from './session-queries.ts';

/** Where the person wanted to go, kept through sign-in and acceptance. */
export const wishedUrl = (request: Request): string | undefined => {
  const { pathname, search } = new URL(request.url);
  return pathname === '/' ? undefined : `${pathname}${search}`;
};

/** Only a path of our own is followed after sign-in. */
export const safeNext = (next: string | null): string => (next && /^\/(?![/\\])/.test(next) ? next : paths.home());

/** The session, or null when nobody is signed in. */
export const findSession = async (): Promise<Session | null> => {
  try {
    return await queryClient.ensureQueryData(sessionQuery());
  } catch (error) {
    if (error instanceof ApiError && error.code === 'not_signed_in') return null;
    throw error;
  }
};

/** Loader of everything that needs a signed-in person who has accepted the standing notes. */
export const requireSession = async ({ request }: { request: Request }): Promise<Session | Response> => {
  const session = await findSession();
  if (!session) return redirect(paths.signIn(wishedUrl(request)));
  if (session.acceptanceRequired) return redirect(paths.accept(wishedUrl(request)));
  return session;
};

/** For loaders of pages that only some roles can read; without a session the shell's own guard answers. */
export const requireOneOf = async (roles: readonly Role[], detail: string): Promise<void> => {
  const session = await findSession();
  if (session && !holdsOneOf(session, roles)) throw notForRole(detail);
};

export const SITE_DATA_DETAIL =
  'Underwriters, modelers and auditors can open this. Account admins see runs and money, but no site data.';
