import type { Request, RequestHandler, Response } from 'express';
import type { z } from 'zod';
import type { BodyOf, Endpoint, ParamsOf, QueryOf } from '#contract/endpoint.ts';
import { holdsOneOf, type Actor, type Identity } from '../actor.ts';
import { AppError } from '../errors.ts';
import type { Once } from './idempotency.ts';

import { parsePart } from './problem.ts';

interface Parts<E extends Endpoint> {
  params: ParamsOf<E>;
  query: QueryOf<E>;
  body: BodyOf<E>;
  req: Request;
  res: Response;
}
type Reply<E extends Endpoint> = z.input<E['response']>;
type Answer<E extends Endpoint> = Reply<E> | Promise<Reply<E>>;

const endpoints = new WeakMap<RequestHandler, Endpoint>();
/** The endpoint a mounted handler serves, so that a test can see that each is mounted where it says. */
export const endpointOf = (handler: RequestHandler): Endpoint | undefined => endpoints.get(handler);

const authorise = ({ access }: Endpoint, identity: Identity | undefined): void => {
  if (access === 'public') return;
  if (!identity) throw new AppError('not_signed_in', 'Sign in to go on.');
  if (access === 'session') return;
  if (identity.acceptanceRequired !== null)
    throw new AppError('acceptance_required', 'Read and accept the standing notes first.');
  if (access !== 'member' && !holdsOneOf(identity.actor, access))
    throw new AppError(
      'not_allowed',
      `Your role doesn’t include this. It is for: ${access.join(', ')}. Ask an admin of your organisation.`,
    );
};

const parse = <E extends Endpoint>(endpoint: E, req: Request, res: Response): Parts<E> => {
  const part = (name: 'params' | 'query' | 'body', schema: z.ZodType | undefined, given: unknown) =>
    schema ? parsePart(name, schema, given) : { value: undefined, faults: [] };
  const params = part('params', endpoint.params, req.params);
  // An id that can't be one of ours is simply not there.
  if (params.faults.length > 0) throw new AppError('not_found', 'There is nothing at this address.');
  const query = part('query', endpoint.query, req.query);
  const body = part('body', endpoint.body, req.body ?? {});
  const faults = [...query.faults, ...body.faults];
  if (faults.length > 0) {
    const count = faults.length === 1 ? 'One thing needs' : `${faults.length} things need`;
    throw new AppError('invalid_request', `${count} changing before this can be done.`, { faults });
  }
  return { params: params.value, query: query.value, body: body.value, req, res } as Parts<E>;
};

const remember = (endpoint: Endpoint, handler: RequestHandler): RequestHandler => {
  endpoints.set(handler, endpoint);
  return handler;
};

const send = (endpoint: Endpoint, res: Response, reply: unknown): void => {
  // A stray column never leaves the building, and a reply that breaks the contract is our defect.
  const parsed = endpoint.response.parse(reply);
  res.set('Cache-Control', 'no-store');
  if (endpoint.status === 204) res.status(204).end();
  else res.status(endpoint.status).json(parsed);
};

const actorOf = (req: Request): Actor => {
  if (!req.identity) throw new Error('An endpoint that needs a signed-in person ran without one');
  return req.identity.actor;
};

/** Serves an endpoint of the contract to signed-in people: checks access, parses, answers by the contract. */
export const handle = <E extends Endpoint>(
  endpoint: E,
  fn: (context: Parts<E> & { actor: Actor }) => Answer<E>,
): RequestHandler => {
  if (endpoint.access === 'public') throw new Error(`${endpoint.id} is public: serve it by handlePublic`);
  return remember(endpoint, async (req, res) => {
    authorise(endpoint, req.identity);
    const actor = actorOf(req);
    const work = async (): Promise<unknown> =>
      endpoint.response.parse(await fn({ ...parse(endpoint, req, res), actor }));
    if (!endpoint.idempotent) {
      send(endpoint, res, await work());
      return;
    }
    const once = req.app.get('once') as Once;
    const { status, reply } = await once(actor, req, endpoint.status, work);
    res.set('Cache-Control', 'no-store').status(status).type('application/json').send(reply);
  });
};

/** Serves an endpoint anyone may call; `identity` is who the cookie says, if anybody. */
export const handlePublic = <E extends Endpoint>(
  endpoint: E,
  fn: (context: Parts<E> & { identity: Identity | undefined }) => Answer<E>,
): RequestHandler =>
  remember(endpoint, async (req, res) => {
    send(endpoint, res, await fn({ ...parse(endpoint, req, res), identity: req.identity }));
  });

/** Serves an endpoint whose function writes the reply itself: CSV downloads and server-sent events. */
export const handleStream = <E extends Endpoint>(
  endpoint: E,
  fn: (context: Parts<E> & { actor: Actor }) => Promise<void>,
): RequestHandler =>
  remember(endpoint, async (req, res) => {
    authorise(endpoint, req.identity);
    const parts = parse(endpoint, req, res);
    res.set('Cache-Control', 'no-store');
    await fn({ ...parts, actor: actorOf(req) });
  });
