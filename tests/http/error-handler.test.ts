import { Readable } from 'node:stream';
import express, { Router, type Express } from 'express';
import pino from 'pino';
import request from 'supertest';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { ErrorCode, Problem } from '#contract/errors.ts';
import { AppError, notFound } from '../../api/errors.ts';
import { errorHandler, noSuchAddress } from '../../api/http/error-handler.ts';
import { handlePublic } from '../../api/http/handle.ts';
import { parsePart, statusOf } from '../../api/http/problem.ts';
import { requestId } from '../../api/http/request-id.ts';
import { endpoint } from '#contract/endpoint.ts';

const logged: string[] = [];
const log = pino({}, { write: (line: string) => void logged.push(line) });

const appWith = (routes: (router: Router) => void): Express => {
  const app = express();
  const router = Router();
  routes(router);
  return app.use(requestId, express.json({ limit: '1kb' }), router, noSuchAddress, errorHandler(log));
};

describe('a failed request', () => {
  it('is answered as problem details with its number', async () => {
    const app = appWith((router) =>
      router.get('/', () => {
        throw new AppError('balance_too_low', 'The free balance is 3.00 and the run costs 5.00.', {
          faults: [{ path: 'body.amount', message: 'Top up first.' }],
        });
      }),
    );
    const reply = await request(app)
      .get('/')
      .expect(402)
      .expect('Content-Type', /application\/problem\+json/);
    const problem = Problem.parse(reply.body);
    expect(problem).toMatchObject({
      code: 'balance_too_low',
      detail: 'The free balance is 3.00 and the run costs 5.00.',
    });
    expect(problem.faults).toEqual([{ path: 'body.amount', message: 'Top up first.' }]);
    expect(problem.requestId).toBe(reply.get('X-Request-Id'));
  });
  it('says when to come back', async () => {
    const app = appWith((router) =>
      router.get('/', () => {
        throw new AppError('too_many_requests', 'Wait.', { retryAfterS: 12.2 });
      }),
    );
    await request(app).get('/').expect(429).expect('Retry-After', '13');
  });
  it.each([
    ['refuses connections', Object.assign(new Error('connect ECONNREFUSED'), { code: 'ECONNREFUSED' })],
    ['is shut down', Object.assign(new Error('terminating connection'), { code: '57P01' })],
    ['breaks off', new Error('Connection terminated unexpectedly')],
    [
      'has no connection free',
      Object.assign(new Error('Timeout acquiring a connection'), { name: 'KnexTimeoutError' }),
    ],
  ])('says to wait when the database %s', async (_what, error) => {
    const app = appWith((router) =>
      router.get('/', () => {
        throw error;
      }),
    );
    const reply = await request(app).get('/').expect(503).expect('Retry-After', '5');
    expect(reply.body.code).toBe('unavailable');
  });
  it('shows nothing of a defect but the number, which the log knows', async () => {
    const app = appWith((router) =>
      router.get('/', async () => {
        throw new Error('password of /etc/secret is swordfish');
      }),
    );
    const reply = await request(app).get('/').expect(500);
    expect(reply.text).not.toContain('swordfish');
    expect(reply.body.detail).toContain(reply.body.requestId);
    expect(logged.at(-1)).toContain(reply.body.requestId);
    expect(logged.at(-1)).toContain('swordfish');
  });
  it('is cut off when its reply had already begun', async () => {
    const app = appWith((router) =>
      router.get('/', (_req, res) => {
        res.write('row 1\n');
        throw new Error('half-way');
      }),
    );
    await expect(request(app).get('/')).rejects.toThrow(/aborted|hang up|closed/i);
  });
  it.each(Object.values(ErrorCode.enum))('has a status of its own kind: %s', (code) => {
    expect(statusOf(code)).toBeGreaterThanOrEqual(400);
    expect(statusOf(code)).toBeLessThan(600);
  });
  it('gives one answer for what isn’t there', () => {
    expect(notFound('Run', '7').code).toBe('not_found');
  });
});

describe('a body that can’t be read', () => {
  const app = appWith((router) => {
    router.post('/', (req, res) => void res.json(req.body));
    router.get('/things/:thingId', (req, res) => void res.json(req.params));
  });
  const post = (body: string, type = 'application/json') => request(app).post('/').set('Content-Type', type).send(body);

  it('is refused when it isn’t JSON, without the parser’s words', async () => {
    const reply = await post('{"a":').expect(400);
    expect(reply.body).toMatchObject({ code: 'malformed_request', detail: 'The body isn’t valid JSON.' });
  });
  it('is refused when it is too large', async () => {
    const reply = await post(JSON.stringify({ a: 'x'.repeat(2000) })).expect(413);
    expect(reply.body.code).toBe('file_too_large');
  });
  it('is refused in an unknown character set', () => post('{}', 'application/json; charset=klingon').expect(400));
  it('doesn’t confuse an address that can’t be decoded', () => request(app).get('/things/%E0%A4%A').expect(400));
  it('finds nothing where there is nothing', async () => {
    const reply = await request(app).get('/no/such/place').expect(404);
    expect(reply.body.detail).toBe('There is nothing at this address.');
  });
});

describe('faults in a request', () => {
  const Body = z.object({
    name: z.string().min(2).max(5),
    size: z.int().min(1).max(9),
    kind: z.enum(['a', 'b']),
    at: z.iso.datetime(),
    own: z.string().min(3, 'Write three letters.'),
    inner: z.object({ list: z.array(z.number()).max(2) }),
  });
  it('are all listed at once, each with its place, in words', () => {
    const { faults } = parsePart('body', Body, {
      name: 'x',
      size: 'big',
      kind: 'c',
      at: 'noon',
      own: '',
      inner: { list: [1, 2, 3] },
    });
    expect(faults).toEqual([
      { path: 'body.name', message: 'This must be at least 2 characters.' },
      { path: 'body.size', message: 'This must be a number.' },
      { path: 'body.kind', message: 'This must be one of: a, b.' },
      { path: 'body.at', message: 'This must be a time such as 2026-12-01T12:00:00.000Z.' },
      { path: 'body.own', message: 'Write three letters.' },
      { path: 'body.inner.list', message: 'This must be at most 2 entries.' },
    ]);
  });
  it('name what is missing', () => {
    const { faults } = parsePart('query', z.object({ q: z.string() }), {});
    expect(faults).toEqual([{ path: 'query.q', message: 'This is missing.' }]);
  });
});

describe('a reply', () => {
  const thing = endpoint({
    id: 'thing',
    method: 'get',
    path: '/thing',
    summary: 'A thing',
    access: 'public',
    response: z.object({ id: z.string() }),
    status: 200,
  });
  it('carries nothing the contract doesn’t name', async () => {
    const stray = { id: '1', password_hash: 'x' };
    const app = appWith((router) =>
      router.get(
        '/thing',
        handlePublic(thing, () => stray),
      ),
    );
    const reply = await request(app).get('/thing').expect(200);
    expect(reply.body).toEqual({ id: '1' });
  });
  it('that breaks the contract is our defect, not the caller’s', async () => {
    const app = appWith((router) =>
      router.get(
        '/thing',
        handlePublic(thing, () => ({ id: 7 }) as unknown as { id: string }),
      ),
    );
    const reply = await request(app).get('/thing').expect(500);
    expect(reply.body.code).toBe('internal');
  });
  it('under way is not taken for whole when its source fails', async () => {
    const app = appWith((router) =>
      router.get('/', async (_req, res, next) => {
        const source = Readable.from(
          (async function* () {
            yield 'row 1\n';
            throw new Error('lost');
          })(),
        );
        source.on('error', next);
        source.pipe(res);
      }),
    );
    await expect(request(app).get('/')).rejects.toThrow(/aborted|hang up|closed/i);
  });
});
