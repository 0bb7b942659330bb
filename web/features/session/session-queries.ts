import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { useRouteLoaderData } from 'react-router-dom';
import { acceptNotes, getSession, signIn, signOut, type Session, type SignIn } from '#contract/session.ts';
import type { Role } from '#contract/roles.ts';
import { call } from '../../api/call.ts';

export const sessionQuery = () =>
  queryOptions({
    queryKey: ['session'],
    queryFn: ({ signal }) => call(getSession, { signal }),
    staleTime: 5 * 60_000,
  });

/** Route id whose loader guarantees the session. */
export const SIGNED_IN_ROUTE = 'signed-in';

/** The session of the person using the page; only below the signed-in route. */
export const useSession = (): Session => {
  const session = useRouteLoaderData<Session>(SIGNED_IN_ROUTE);
  if (!session) throw new Error('useSession is for pages below the signed-in route');
  return session;
};

export const holdsOneOf = (session: Session, roles: readonly Role[]): boolean =>
  session.roles.some((role) => roles.includes(role));

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: SignIn) => call(signIn, { body }),
    onSuccess: (session) => {
      client.clear();
      client.setQueryData(sessionQuery().queryKey, session);
    },
  });
}

export function useAcceptNotes() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { version: string; name: string }) => call(acceptNotes, { body }),
    onSuccess: (session) => client.setQueryData(sessionQuery().queryKey, session),
  });
}

export function useSignOut() {
  const client = useQueryClient();
  return useMutation({ mutationFn: () => call(signOut), onSettled: () => client.clear() });
}
