import { setTimeout as sleep } from 'node:timers/promises';
import { Router } from 'express';
import request from 'supertest';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { endpoint } from '#contract/endpoint.ts';
import { AppError } from '../../api/errors.ts';
import { openEvents } from '../../api/http/events.ts';
import { handle, handleStream } from '../../api/http/handle.ts';
import { WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { createTestApp } from '../helpers/app.ts';
import { DUNE, PASSWORD } from '../helpers/people.ts';

const Body = z.object({ amount: z.int() });
const Reply = z.object({ amount: z.int(), time: z.int() });
const pay = endpoint({
  ...{ id: 'pay', method: 'post', path: '/try/pay', summary: 'Pays once', access: ['admin', 'underwriter'] },
  ...{ idempotent: true, body: Body, response: Reply, status: 201 },
});
const watching = endpoint({
  ...{ id: 'watching', method: 'get', path: '/try/events', summary: 'Events', access: 'member' },
  ...{ stream: 'text/event-stream', response: z.object({ n: z.int() }), status: 200 },
});

let payments = 0;
let failure: AppError | null = null;
const router = Router();
router.post(
  pay.path,
  handle(pay, async ({ body }) => {
    await sleep(150);
    if (failure) throw failure;
    payments += 1;
    return { amount: body.amount, time: payments };
  }),
);
router.get(
  watching.path,
  handleStream(watching, async ({ res }) => {
    const events = openEvents(res);
    events.send({ n: 1 });
    events.send({ n: 2 });
    events.close();
  }),
);

const { app, signIn, database, clock } = await createTestApp({ routers: [router] });
const admin = await signIn('admin');
const PAY = `/api/v1${pay.path}`;

describe('who may call', () => {
  it('is told by role; the refusal names the roles', async () => {
    const auditor = await signIn('auditor');
    const reply = await auditor.post(pay.path, { amount: 1 }).expect(403);
    expect(reply.body).toMatchObject({ code: 'not_allowed', detail: expect.stringContaining('admin, underwriter') });
  });
  it('is nobody without a session', () => request(app).get(`/api/v1${watching.path}`).expect(401));
});

describe('a change by a signed-in browser', () => {
  const bare = () => admin.bare.post(PAY).set('Idempotency-Key', 'csrf-test-1').send({ amount: 1 });
  it('is refused without the session’s token', async () => {
    const reply = await bare().expect(403);
    expect(reply.body.code).toBe('csrf_mismatch');
  });
  it('is refused with another session’s token', async () => {
    const other = await signIn('underwriter');
    await bare().set('X-CSRF-Token', other.session.csrfToken).expect(403);
  });
  it('is refused when header and cookie differ, though the header is right', async () => {
    const access = admin.bare.jar.getCookie('gustloom_access', {
      domain: '127.0.0.1',
      path: '/',
      secure: false,
      script: false,
    });
    await request(app)
      .post(PAY)
      .set('Cookie', [`gustloom_access=${access?.value}`, 'gustloom_csrf=planted'])
      .set('X-CSRF-Token', admin.session.csrfToken)
      .set('Idempotency-Key', 'csrf-test-2')
      .send({ amount: 1 })
      .expect(403);
  });
  it('is refused when the browser says that another site sent it, sign-in included', async () => {
    await request(app)
      .post('/api/v1/session')
      .set('Sec-Fetch-Site', 'cross-site')
      .send({ email: DUNE.people.admin.email, password: PASSWORD })
      .expect(403);
  });
  it('goes through with the token', () => admin.post(pay.path, { amount: 1 }).expect(201));
});

describe('an Idempotency-Key', () => {
  const once = (key: string, amount = 5) => admin.post(pay.path, { amount }, { 'Idempotency-Key': key });

  it('is asked for', async () => {
    const reply = await admin.bare
      .post(PAY)
      .set('X-CSRF-Token', admin.session.csrfToken)
      .send({ amount: 1 })
      .expect(400);
    expect(reply.body.code).toBe('idempotency_key_missing');
    await once('short').expect(400);
  });
  it('gives a repeat the first reply, and does nothing again', async () => {
    const before = payments;
    const first = await once('repeat-me-1').expect(201);
    const second = await once('repeat-me-1').expect(201);
    expect(second.text).toBe(first.text);
    expect(payments).toBe(before + 1);
  });
  it('makes ten at once do the work once', async () => {
    const before = payments;
    const replies = await Promise.all(Array.from({ length: 10 }, () => once('all-at-once')));
    expect(new Set(replies.map(({ text }) => text)).size).toBe(1);
    expect(payments).toBe(before + 1);
  });
  it('isn’t taken for a different request', async () => {
    await once('one-intent-1', 5).expect(201);
    const reply = await once('one-intent-1', 6).expect(422);
    expect(reply.body.code).toBe('idempotency_key_reused');
  });
  it('may be used again after a failure, once its cause is put right', async () => {
    failure = new AppError('balance_too_low', 'Top up first.');
    await once('try-again-1').expect(402);
    failure = null;
    await once('try-again-1').expect(201);
  });
  it('is each person’s own', async () => {
    const underwriter = await signIn('underwriter');
    const mine = await once('same-word-1').expect(201);
    const theirs = await underwriter.post(pay.path, { amount: 5 }, { 'Idempotency-Key': 'same-word-1' }).expect(201);
    expect(theirs.body.time).not.toBe(mine.body.time);
  });
  it('left by a process that died is taken over after a while', async () => {
    await once('died-half-way').expect(201);
    await database.superUser('idempotency_keys').where({ key: 'died-half-way' }).update({ status: null, reply: null });
    clock.pass(31_000);
    await once('died-half-way').expect(201);
  });
});

describe('event streams', () => {
  it('come as server-sent events that no proxy holds back', async () => {
    const reply = await admin.get(watching.path).expect(200);
    expect(reply.get('Content-Type')).toContain('text/event-stream');
    expect(reply.get('Cache-Control')).toContain('no-transform');
    expect(reply.text).toBe('data: {"n":1}\n\ndata: {"n":2}\n\n');
  });
});

describe('limits', () => {
  const tight = { windowMs: 60_000, requests: 3 };
  it('refuse with Retry-After, and only whoever exceeds them', async () => {
    const limited = await createTestApp({ limits: { all: tight, signIn: tight, compute: tight, draws: tight } });
    for (let count = 0; count < 3; count += 1) await request(limited.app).get('/api/v1/session').expect(401);
    const reply = await request(limited.app).get('/api/v1/session').expect(429);
    expect(reply.body.code).toBe('too_many_requests');
    expect(Number(reply.get('Retry-After'))).toBeGreaterThan(0);
    await request(limited.app).get('/api/health').expect(200);
  });
});

describe('the sign-in limit', () => {
  it('counts wrong guesses, not what goes well', async () => {
    const wide = { windowMs: 60_000, requests: 1000 };
    const limited = await createTestApp({
      limits: { all: wide, signIn: { windowMs: 60_000, requests: 2 }, compute: wide, draws: wide },
    });
    const enter = (password: string) =>
      request(limited.app).post('/api/v1/session').send({ email: DUNE.people.admin.email, password });
    for (let count = 0; count < 4; count += 1) await enter(PASSWORD).expect(201);
    for (let count = 0; count < 2; count += 1) await enter('a guess').expect(401);
    await enter(PASSWORD).expect(429);
  });
});

describe('every page', () => {
  it('carries the strict content security policy', async () => {
    const reply = await request(app).get('/api/docs').expect(200);
    const policy = reply.get('Content-Security-Policy') ?? '';
    expect(policy).toContain(`default-src 'none'`);
    expect(policy).not.toMatch(/unsafe|https?:|blob:|\*/);
    expect(reply.get('X-Powered-By')).toBeUndefined();
  });
  it('of the API leads to the limits of use', async () => {
    const reply = await request(app).get('/api/v1/session').expect(401);
    expect(reply.get('Link')).toMatch(/^<https?:\/\/[^>]+\/limits>; rel="terms-of-service"$/);
  });
  it('under the API that isn’t there is a problem, not the client', async () => {
    const reply = await request(app).get('/api/v1/no-such-thing').expect(404);
    expect(reply.body.code).toBe('not_found');
  });
});

describe('the description', () => {
  it('is OpenAPI 3.1 and names every operation once', async () => {
    const { body } = await request(app).get('/api/v1/openapi.json').expect(200);
    expect(body.openapi).toBe('3.1.0');
    const operations = Object.values(body.paths as Record<string, Record<string, { operationId: string }>>).flatMap(
      (path) => Object.values(path).map(({ operationId }) => operationId),
    );
    expect(new Set(operations).size).toBe(operations.length);
    expect(operations).toContain('acceptQuote');
  });
  it('says of every wind choice what it decides and where each value comes from', async () => {
    const { text } = await request(app).get('/api/v1/openapi.json').expect(200);
    for (const { meaning, reason, values } of WIND_CHOICES) {
      for (const words of [meaning, reason, ...values.map(({ source }) => source)])
        expect(text).toContain(JSON.stringify(words).slice(1, -1));
    }
  });
});
