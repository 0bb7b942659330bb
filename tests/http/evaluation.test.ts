import request from 'supertest';
import { describe, expect, it } from 'vitest';
import { EvaluationReply } from '#contract/evaluations.ts';
import { Problem } from '#contract/errors.ts';
import type { Role } from '#contract/roles.ts';
import { createTestApp } from '../helpers/app.ts';
import { workedRequest } from '../helpers/evaluation-request.ts';
import { expectPrinted } from '../helpers/printed.ts';

const { app, signIn, database } = await createTestApp();
const browser = await signIn('underwriter');
const PATH = '/evaluations';
const problemOf = (reply: { body: unknown }) => Problem.parse(reply.body);

describe('POST /api/v1/evaluations', () => {
  it('gives the worked numbers, computed from the published formula', async () => {
    const reply = await browser.post(PATH, workedRequest()).expect(200).expect('Cache-Control', 'no-store');
    const { sites, event, storm } = EvaluationReply.parse(reply.body);
    const printed: [number, string, string][] = [
      [0, '61.416515', '63.115409'],
      [1, '54.854776', '55.935145'],
      [2, '44.787471', '45.671011'],
      [3, '46.694467', '46.689950'],
      [4, '23.910312', '23.910312'],
    ];
    for (const [site, plain, p50] of printed) {
      expectPrinted(sites[site]!.plain!.gustMs, plain);
      expectPrinted(sites[site]!.enhanced!.p50Ms, p50);
    }
    expect(storm.wavenumber).toBe(4);
    expect(event!.grossP50).toBeCloseTo(148173.09, 1);
  });
  it('answers alike each time, whoever asks, and stores nothing', async () => {
    const counts = async () => {
      const { rows } = await database.superUser.raw<{ rows: Record<string, string>[] }>(
        `select (select count(*) from runs) as runs, (select count(*) from ledger_entries) as ledger,
           (select count(*) from scenarios) as scenarios, (select count(*) from quotes) as quotes`,
      );
      return rows[0];
    };
    const before = await counts();
    const first = await browser.post(PATH, workedRequest()).expect(200);
    for (const role of ['modeler', 'auditor', 'admin'] satisfies Role[]) {
      const other = await (await signIn(role)).post(PATH, workedRequest()).expect(200);
      expect(other.body).toEqual(first.body);
    }
    expect(await counts()).toEqual(before);
  });
});

describe('a request with faults', () => {
  it('is told every one of them, single fields and those between fields alike, and gets no part of an answer', async () => {
    const body = workedRequest() as { track: Record<string, unknown>[]; sites: Record<string, unknown>[] };
    body.track[1]!.windAveragingSeconds = 90;
    body.track[2]!.time = body.track[0]!.time;
    body.track[4]!.centralPressureHpa = 95_500;
    body.sites[0]!.siteRef = 'S2';
    body.sites[2]!.roughnessLengthM = 0;
    body.sites[3]!.latitude = 'north';
    const reply = await browser.post(PATH, { ...body, options: { anchor: 'middle' } }).expect(422);
    expect(reply.get('Content-Type')).toContain('application/problem+json');
    const problem = problemOf(reply);
    expect(problem.code).toBe('invalid_request');
    expect(problem.faults.map(({ path }) => path).sort()).toEqual([
      'body.options.anchor',
      'body.sites.1.siteRef',
      'body.sites.2.roughnessLengthM',
      'body.sites.3.latitude',
      'body.track.1.windAveragingSeconds',
      'body.track.2.time',
      'body.track.4.centralPressureHpa',
    ]);
    for (const { message } of problem.faults) expect(message).toMatch(/\.$/);
    expect(reply.body).not.toHaveProperty('sites');
  });
  it('is told what is missing when it is empty', async () => {
    const { faults } = problemOf(await browser.post(PATH, {}).expect(422));
    expect(faults.map(({ path }) => path)).toEqual(['body.track', 'body.sites']);
  });
  it('is refused whole when one site’s number can’t be right', async () => {
    const body = workedRequest();
    body.sites[0]!.topographicFactor = 2.9;
    const { faults, detail } = problemOf(await browser.post(PATH, body).expect(422));
    expect(faults.map(({ path }) => path)).toEqual(['body.sites.0']);
    expect(detail).toContain('site S1');
  });
  it('can’t be read at all: 400', async () => {
    const change = { 'X-CSRF-Token': browser.session.csrfToken, 'Content-Type': 'application/json' };
    const reply = await browser.bare.post(`/api/v1${PATH}`).set(change).send('{"track": [').expect(400);
    expect(problemOf(reply).code).toBe('malformed_request');
  });
});

describe('whom it isn’t for', () => {
  it('is nobody without a session: 401, before a word is said about the request', async () => {
    const reply = await request(app).post(`/api/v1${PATH}`).send({}).expect(401);
    expect(problemOf(reply)).toMatchObject({ code: 'not_signed_in', faults: [] });
  });
  it('is a page without the session’s token: 403', async () => {
    const reply = await browser.bare.post(`/api/v1${PATH}`).send(workedRequest()).expect(403);
    expect(problemOf(reply).code).toBe('csrf_mismatch');
  });
  it('is whoever hasn’t accepted the standing notes: 403', async () => {
    await database.superUser('acceptances').delete();
    const newcomer = await signIn('modeler', { accept: false });
    const reply = await newcomer.post(PATH, workedRequest()).expect(403);
    expect(problemOf(reply)).toMatchObject({ code: 'acceptance_required', faults: [] });
  });
});

describe('the limit of calculations', () => {
  const wide = { windowMs: 60_000, requests: 1000 };
  it('answers 429 with the seconds to wait, and holds up nothing else', async () => {
    const limits = { all: wide, signIn: wide, compute: { windowMs: 60_000, requests: 2 }, draws: wide };
    const limited = await createTestApp({ limits });
    const person = await limited.signIn('underwriter');
    for (let count = 0; count < 2; count += 1) await person.post(PATH, workedRequest()).expect(200);
    const reply = await person.post(PATH, workedRequest()).expect(429);
    expect(problemOf(reply).code).toBe('too_many_requests');
    const wait = Number(reply.get('Retry-After'));
    expect(Number.isInteger(wait)).toBe(true);
    expect(wait).toBeGreaterThan(0);
    expect(wait).toBeLessThanOrEqual(60);
    await person.get('/portfolios').expect(200);
  });
  it('is over once that time has passed', async () => {
    const limits = { all: wide, signIn: wide, compute: { windowMs: 1_000, requests: 1 }, draws: wide };
    const limited = await createTestApp({ limits });
    const person = await limited.signIn('underwriter');
    let refused = 200;
    for (let count = 0; count < 20 && refused === 200; count += 1) {
      refused = (await person.post(PATH, {})).status === 429 ? 429 : 200;
    }
    expect(refused).toBe(429);
    await new Promise((resolve) => setTimeout(resolve, 1_100));
    await person.post(PATH, workedRequest()).expect(200);
  });
});
