import { z } from 'zod';
import { Id, Nothing } from './common.ts';
import { endpoint } from './endpoint.ts';
import { Role } from './roles.ts';

export const Person = z.object({ id: Id, name: z.string(), email: z.string() });
export const Organisation = z.object({ id: Id, name: z.string(), initials: z.string() });

export const Session = z.object({
  person: Person,
  organisation: Organisation,
  roles: z.array(Role),
  isApprover: z.boolean(),
  /** Version of the standing notes still to accept; null when the current one is accepted. */
  acceptanceRequired: z.string().nullable(),
  /** To be sent back as X-CSRF-Token with every change. */
  csrfToken: z.string(),
});
export type Session = z.infer<typeof Session>;

export const SignIn = z.object({
  email: z.email({ error: 'Write your e-mail address, for example name@company.com.' }).max(254),
  password: z.string().min(1, 'Write your password.').max(200),
});
export type SignIn = z.infer<typeof SignIn>;

export const Acceptance = z.object({
  version: z.string(),
  name: z.string().trim().min(2, 'Write your name as it stands in your organisation.').max(120),
});

export const signIn = endpoint({
  id: 'signIn',
  method: 'post',
  path: '/session',
  summary: 'Sign in',
  access: 'public',
  body: SignIn,
  response: Session,
  status: 201,
});
export const getSession = endpoint({
  id: 'getSession',
  method: 'get',
  path: '/session',
  summary: 'Who is signed in',
  access: 'session',
  response: Session,
  status: 200,
});
export const refreshSession = endpoint({
  id: 'refreshSession',
  method: 'post',
  path: '/session/refresh',
  summary: 'Renew the session from the refresh cookie',
  access: 'public',
  response: Session,
  status: 200,
});
export const signOut = endpoint({
  id: 'signOut',
  method: 'delete',
  path: '/session',
  summary: 'Sign out and revoke the refresh token family',
  access: 'public',
  response: Nothing,
  status: 204,
});
export const acceptNotes = endpoint({
  id: 'acceptNotes',
  method: 'post',
  path: '/session/acceptance',
  summary: 'Accept the standing notes; the version is recorded',
  access: 'session',
  body: Acceptance,
  response: Session,
  status: 200,
});
