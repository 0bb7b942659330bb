import { createHash } from 'node:crypto';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, describe, expect, it } from 'vitest';
import { Quote, Run, RunEvent, RunSlip } from '#contract/runs.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE, REEF } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const { app, container, database, signIn } = await createTestApp({ pool: inlinePool() });
const { superUser } = database;
const book = await addRunFixture(database, { sites: 1_840, balanceMinor: 20_000 });
const tracks = await Promise.all(['Aster', 'Bryony', 'Clover'].map((name) => book.addTrack(name)));
const underwriter = await signIn('underwriter');

const quoteFor = async (versions: string[], more = {}): Promise<Quote> =>
  Quote.parse((await underwriter.post('/quotes', book.request(versions, more)).expect(201)).body);
const free = async (orgId: string) => Number((await superUser('balances').where({ org_id: orgId }).first()).free_minor);

describe('a quote', () => {
  it('prices 1,840 sites under three tracks at 22.08, tax 1.55, together 23.63', async () => {
    const quote = await quoteFor(tracks);
    expect(quote).toMatchObject({
      ...{ readySites: 1_840, heldSites: 2, siteScenarios: 5_520, outOfReach: 0, units: 5_520 },
      ...{ netMinor: 2_208, taxMinor: 155, grossMinor: 2_363, currency: 'USD', minimumApplied: false },
      ...{ state: 'open', identicalRunId: null, freeBalanceMinor: 20_000 },
    });
    expect(quote.number).toMatch(/^Q-\d{4}$/);
    expect(Date.parse(quote.validUntil) - Date.parse(quote.createdAt)).toBe(24 * 3_600_000);
    expect(quote.warnings.map(({ code }) => code)).toEqual(['held-sites', 'assumed-share', 'curve-fitted-on-plain']);
    expect(quote.assumedTivShare).toBeCloseTo(0.25, 9);
  });

  it('numbers on within the organisation, and counts a track asked for twice once', async () => {
    const first = await quoteFor([tracks[0]!]);
    const second = await quoteFor([tracks[0]!, tracks[0]!]);
    expect(Number(second.number.slice(2))).toBe(Number(first.number.slice(2)) + 1);
    expect(second).toMatchObject({ scenarios: 1, units: 1_840 });
  });

  it('refuses an edition that isn’t sealed', async () => {
    const draft = await addRunFixture(database, { org: REEF, sites: 3, sealed: false });
    const theirs = await signIn('underwriter', { org: REEF });
    const reply = await theirs.post('/quotes', draft.request([await draft.addTrack('Dock')])).expect(409);
    expect(reply.body.code).toBe('edition_not_sealed');
  });

  it('keeps unsigned calibrations out of underwriting files, and stamps them elsewhere', async () => {
    const calibrationId = book.unsignedCalibrationId;
    const refused = await underwriter.post(
      '/quotes',
      book.request([tracks[0]!], { calibrationId, purpose: 'underwriting_file' }),
    );
    expect(refused.body.code).toBe('calibration_not_signed');
    const quote = await quoteFor([tracks[0]!], { calibrationId });
    expect(quote.warnings[0]!.code).toBe('calibration-unsigned');
    const run = Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
    expect(run.stamped).toBe(true);
    expect(run.notices[0]!.code).toBe('calibration-unsigned');
    await underwriter.post(`/runs/${run.id}/cancel`).expect(200);
  });

  it('doesn’t find what another organisation owns', async () => {
    const other = await superUser('scenario_versions').where({ org_id: REEF.id }).first('id');
    for (const request of [
      book.request([other.id]),
      book.request(tracks, { editionId: other.id }),
      book.request(tracks, { calibrationId: other.id }),
      book.request(tracks, { curveSetId: other.id }),
    ]) {
      expect((await underwriter.post('/quotes', request).expect(404)).body.code).toBe('not_found');
    }
  });

  it('costs nothing when every site is out of reach, and still leaves a record of zero loss', async () => {
    const far = await quoteFor([await book.addTrack('Far', gulfTrack(100))]);
    expect(far).toMatchObject({ units: 0, outOfReach: 1_840, grossMinor: 0, minimumApplied: false });
    const run = Run.parse((await underwriter.post(`/quotes/${far.id}/accept`).expect(201)).body);
    await container.scoreJob.run({
      data: { orgId: DUNE.id, runId: run.id, runScenarioId: run.scenarios[0]!.id },
      restarts: 0,
      signal: new AbortController().signal,
    });
    const done = Run.parse((await underwriter.get(`/runs/${run.id}`).expect(200)).body);
    expect(done).toMatchObject({ state: 'complete', chargedMinor: 0, grossPlainMinor: 0, gross: null });
  });
});

describe('accepting', () => {
  it('twice with one key makes one run, one reservation and one answer', async () => {
    const quote = await quoteFor([tracks[0]!]);
    const before = await free(DUNE.id);
    const key = { 'Idempotency-Key': 'one-intent-only' };
    const replies = await Promise.all(
      [1, 2, 3].map(() => underwriter.post(`/quotes/${quote.id}/accept`, undefined, key)),
    );
    expect(replies.map(({ status }) => status)).toEqual([201, 201, 201]);
    expect(new Set(replies.map(({ body }) => body.id)).size).toBe(1);
    expect(await superUser('runs').where({ quote_id: quote.id })).toHaveLength(1);
    expect(await free(DUNE.id)).toBe(before - quote.grossMinor);
    const jobs = await superUser('pgboss.job').whereRaw(`data ->> 'runId' = ?`, [replies[0]!.body.id]);
    expect(jobs).toHaveLength(1);
  });

  it('with two keys at once makes one run and tells the other so', async () => {
    const quote = await quoteFor([tracks[0]!]);
    const replies = await Promise.all([1, 2].map(() => underwriter.post(`/quotes/${quote.id}/accept`)));
    expect(replies.map(({ status }) => status).sort()).toEqual([201, 409]);
    expect(replies.find(({ status }) => status === 409)!.body.code).toBe('quote_used');
  });

  it('lets two runs race for the last of the balance, and one of them loses nothing but the race', async () => {
    const quotes = [await quoteFor(tracks), await quoteFor(tracks)];
    await superUser('balances').where({ org_id: DUNE.id }).update({ free_minor: 2_400 });
    const replies = await Promise.all(quotes.map(({ id }) => underwriter.post(`/quotes/${id}/accept`)));
    expect(replies.map(({ status, body }) => body.code ?? status).sort()).toEqual([201, 'balance_too_low']);
    expect(await free(DUNE.id)).toBe(2_400 - 2_363);
    const lost = quotes[replies.findIndex(({ status }) => status !== 201)]!;
    expect(await superUser('runs').where({ quote_id: lost.id })).toEqual([]);
    expect((await underwriter.get(`/quotes/${lost.id}`).expect(200)).body.state).toBe('open');
    await superUser('balances').where({ org_id: DUNE.id }).update({ free_minor: 20_000 });
  });

  it('needs a new quote after the engine has been updated', async () => {
    const quote = await quoteFor([tracks[0]!]);
    await superUser('quotes').where({ id: quote.id }).update({ engine_version: 'an older one' });
    expect((await underwriter.post(`/quotes/${quote.id}/accept`).expect(409)).body.code).toBe('quote_expired');
  });
});

it('lists runs newest first, a page at a time', async () => {
  const first = (await underwriter.get('/runs?limit=2').expect(200)).body;
  expect(first.items).toHaveLength(2);
  const seen: string[] = first.items.map(({ id }: { id: string }) => id);
  for (let cursor = first.nextCursor; cursor !== null;) {
    const { body } = await underwriter.get(`/runs?limit=2&cursor=${cursor}`).expect(200);
    seen.push(...body.items.map(({ id }: { id: string }) => id));
    cursor = body.nextCursor;
  }
  const stored = await superUser('runs').where({ org_id: DUNE.id }).select('id');
  expect(seen).toHaveLength(stored.length);
  expect(new Set(seen).size).toBe(seen.length);
  const other = await underwriter.get(`/runs?portfolioId=${DUNE.id}`).expect(200);
  expect(other.body.items).toEqual([]);
});

it('gives a run slip whose digest anybody can work out again from it', async () => {
  const quote = await quoteFor([tracks[1]!, tracks[0]!]);
  const { id } = (await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body;
  const slip = RunSlip.parse((await underwriter.get(`/runs/${id}/slip`).expect(200)).body);
  const { options } = slip;
  const parts = [
    'run inputs 1',
    slip.edition.digest,
    slip.scenarios.map(({ digest }) => digest).sort(),
    slip.calibration.digest,
    slip.curveSet.digest,
    [options.mesovortices, options.intensity, options.anchor, options.gustThresholdsMs],
  ];
  expect(slip.inputsDigest).toBe(createHash('sha256').update(JSON.stringify(parts)).digest('hex'));
  expect(slip).toMatchObject({ quote: { number: quote.number }, calibration: { code: 'CAL-1', state: 'signed' } });
  await underwriter.post(`/runs/${id}/cancel`).expect(200);
});

describe('wind choices of a run', () => {
  const options = (wind?: object) => ({
    ...{ mesovortices: true, intensity: 'pressure', anchor: 'auto', gustThresholdsMs: [40, 50] },
    ...(wind && { wind }),
  });
  const digestOf = async (wind?: object): Promise<string> => {
    const { id } = await quoteFor([tracks[0]!], { options: options(wind) });
    return (await superUser('quotes').where({ id }).first('inputs_digest')).inputs_digest;
  };

  it('that are all defaults name the same inputs as none at all', async () => {
    const plain = await digestOf();
    expect(await digestOf({})).toBe(plain);
    expect(await digestOf({ profile: 'holland-1980', fetch: 'by-direction' })).toBe(plain);
    const schwerdt = await digestOf({ asymmetry: 'schwerdt' });
    expect(schwerdt).not.toBe(plain);
    expect(await digestOf({ fetch: 'by-direction', asymmetry: 'schwerdt' })).toBe(schwerdt);
    expect(await digestOf({ asymmetry: 'georgiou' })).not.toBe(schwerdt);
  });

  it('other than the defaults are said in words before the price is accepted and on the slip', async () => {
    const words = [
      'asymmetry from motion: “Schwerdt 1979” instead of “Lin & Chavas 2012”',
      'turbulence: “ESDU” instead of “EN 1991-1-4”',
    ];
    const wind = { turbulence: 'esdu', asymmetry: 'schwerdt' };
    const quote = await quoteFor([tracks[0]!], { options: options(wind) });
    expect(quote.warnings.find(({ code }) => code === 'options-differ')!.text).toBe(
      `Not as signed in calibration CAL-1 version 1: ${words.join('; ')}.`,
    );
    const { id } = (await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body;
    const slip = RunSlip.parse((await underwriter.get(`/runs/${id}/slip`).expect(200)).body);
    expect(slip.choices).toEqual(words);
    await underwriter.post(`/runs/${id}/cancel`).expect(200);
  });
});

describe('watching', () => {
  const server = createServer(app).listen(0, '127.0.0.1');
  afterAll(() => server.close());

  it('sends states as they change and ends with the run', async () => {
    const quote = await quoteFor([tracks[2]!]);
    const run = Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
    const { port } = server.address() as AddressInfo;
    const cookies = await underwriter.get('/session').expect(200);
    const cookie = cookies.request.getHeader?.('Cookie') ?? (cookies.request as { cookies?: string }).cookies;
    const reply = await fetch(`http://127.0.0.1:${port}/api/v1/runs/${run.id}/events`, {
      headers: { cookie: String(cookie) },
    });
    expect(reply.headers.get('content-type')).toContain('text/event-stream');
    const states: string[] = [];
    let text = '';
    for await (const piece of reply.body!.pipeThrough(new TextDecoderStream())) {
      text += piece;
      const events = text.split('\n\n');
      text = events.pop()!;
      for (const event of events.filter((one) => one.startsWith('data: '))) {
        const { runId, state, scenarios } = RunEvent.parse(JSON.parse(event.slice(6)));
        expect(runId).toBe(run.id);
        expect(scenarios).toHaveLength(1);
        states.push(state);
        if (states.length === 1) {
          void container.scoreJob.run({
            data: { orgId: DUNE.id, runId: run.id, runScenarioId: run.scenarios[0]!.id },
            restarts: 0,
            signal: new AbortController().signal,
          });
        }
      }
    }
    expect(states[0]).toBe('waiting');
    expect(states.at(-1)).toBe('complete');
  });
});
