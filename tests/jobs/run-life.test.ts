import { beforeEach, describe, expect, it } from 'vitest';
import { Run, type Quote } from '#contract/runs.ts';
import { AMPLITUDE_WEIGHTS } from '#engine/ring/draws.ts';
import type { Tasks } from '../../api/compute/protocol.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const step: { before: (name: keyof Tasks) => unknown } = { before: () => undefined };
const { container, database, clock, signIn } = await createTestApp({
  pool: inlinePool({ before: (name) => step.before(name) }),
});
const { superUser } = database;
const book = await addRunFixture(database, { balanceMinor: 1_000_000 });
const tracks = await Promise.all(
  ['Aster', 'Bryony', 'Clover'].map((name, i) => book.addTrack(name, gulfTrack(i / 10))),
);
const underwriter = await signIn('underwriter');

beforeEach(() => {
  step.before = () => undefined;
});

const quoteFor = async (versions: string[], more = {}): Promise<Quote> =>
  (await underwriter.post('/quotes', book.request(versions, more)).expect(201)).body as Quote;
const accept = async (quote: Quote): Promise<Run> =>
  Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
const read = async ({ id }: Run): Promise<Run> => Run.parse((await underwriter.get(`/runs/${id}`).expect(200)).body);
const scoreTrack = ({ id, scenarios }: Run, track: number, restarts = 0, signal = new AbortController().signal) =>
  container.scoreJob.run({
    data: { orgId: DUNE.id, runId: id, runScenarioId: scenarios[track]!.id },
    restarts,
    signal,
  });
const balance = async () => {
  const row = await superUser('balances').where({ org_id: DUNE.id }).first('free_minor', 'reserved_minor');
  return { free: Number(row.free_minor), reserved: Number(row.reserved_minor) };
};
const charges = (runId: string) =>
  superUser('ledger_entries')
    .where({ run_id: runId, account: 'reserved' })
    .orderBy('id')
    .select('kind', 'amount_minor');

describe('a run from quote to charge', () => {
  it('reserves the quote, scores every site, stores results once and charges within the quote', async () => {
    const before = await balance();
    const quote = await quoteFor([tracks[0]!]);
    expect(quote).toMatchObject({ units: 60, readySites: 60, heldSites: 2, minimumApplied: true, netMinor: 500 });
    const run = await accept(quote);
    expect(await balance()).toEqual({ free: before.free - quote.grossMinor, reserved: quote.grossMinor });
    await scoreTrack(run, 0);
    const done = await read(run);
    expect(done).toMatchObject({ state: 'complete', scenariosDone: 1, chargedMinor: quote.grossMinor });
    expect(done.scenarios[0]).toMatchObject({ state: 'stored', sitesDone: 60, sitesTotal: 60, restarts: 0 });
    expect(await balance()).toEqual({ free: before.free - quote.grossMinor, reserved: 0 });
    expect(await superUser('site_results').where({ run_scenario_id: run.scenarios[0]!.id })).toHaveLength(60);
  });

  it('adds up to the cent: plain losses and means are the sums of the sites', async () => {
    const run = await accept(await quoteFor([tracks[1]!]));
    await scoreTrack(run, 0);
    const { scenarios, gross } = await read(run);
    const result = scenarios[0]!.result!;
    const sums = await superUser('site_results')
      .where({ run_scenario_id: scenarios[0]!.id })
      .first(
        superUser.raw(
          'sum(gross_plain_minor) as plain, sum(gross_mean_minor) as mean, sum(ground_up_mean_minor) as ground, sum(tiv_minor) as tiv',
        ),
      );
    expect(result.grossPlainMinor).toBe(Number(sums.plain));
    expect(result.gross!.mean).toBe(Number(sums.mean));
    expect(result.groundUp!.mean).toBe(Number(sums.ground));
    expect(result.tivMinor).toBe(Number(sums.tiv));
    expect(gross).toEqual(result.gross);
    expect(result.gross!.p5).toBeLessThan(result.gross!.p50);
    expect(result.gross!.p50).toBeLessThan(result.gross!.p95);
    // The percentiles are the event's own: its 264 sums, sorted by themselves here, with their weights.
    const { gross: draws } = await superUser('event_results')
      .where({ run_scenario_id: scenarios[0]!.id })
      .first('gross');
    const weighed = (draws as number[])
      .map((loss, draw) => ({ loss, weight: AMPLITUDE_WEIGHTS[Math.floor(draw / 24)]! / 24 }))
      .sort((a, b) => a.loss - b.loss);
    const quantile = (level: number) => {
      let reached = 0;
      return weighed.find(({ weight }) => (reached += weight) >= level - 1e-9)!.loss;
    };
    for (const [name, level] of [
      ['p5', 0.05],
      ['p50', 0.5],
      ['p95', 0.95],
    ] as const) {
      expect(result.gross![name]).toBe(Math.round(quantile(level) * 100));
    }
  });

  it('has no range when the vortex layer is off, and enhanced equals plain at every site', async () => {
    const options = { mesovortices: false, intensity: 'pressure', anchor: 'auto', gustThresholdsMs: [40, 50] };
    const run = await accept(await quoteFor([tracks[0]!], { options }));
    await scoreTrack(run, 0);
    const done = await read(run);
    expect(done.gross).toBeNull();
    expect(done.grossPlainMinor).toBeGreaterThan(0);
    expect(done.scenarios[0]!.result).toMatchObject({ gross: null, groundUp: null, wavenumber: null });
    const unlike = await superUser('site_results')
      .where({ run_scenario_id: done.scenarios[0]!.id })
      .whereRaw(
        '(p5, p50, p95, p99, gross_mean_minor) is distinct from (plain, plain, plain, plain, gross_plain_minor)',
      );
    expect(unlike).toEqual([]);
  });

  it('gives the same digest for the same inputs, and offers the earlier run free', async () => {
    const first = await accept(await quoteFor([tracks[2]!]));
    await scoreTrack(first, 0);
    const again = await quoteFor([tracks[2]!]);
    expect(again.identicalRunId).toBe(first.id);
    const second = await accept(again);
    await scoreTrack(second, 0);
    const slips = await Promise.all(
      [first, second].map(async ({ id }) => (await underwriter.get(`/runs/${id}/slip`).expect(200)).body),
    );
    expect(slips[0].scenarios[0].resultDigest).toMatch(/^[0-9a-f]{64}$/);
    expect(slips[1].scenarios[0].resultDigest).toBe(slips[0].scenarios[0].resultDigest);
    expect(slips[1].inputsDigest).toBe(slips[0].inputsDigest);
  });

  it('writes to whoever accepted it: number, state and link, and nothing of any site or loss', async () => {
    const run = await accept(await quoteFor([tracks[0]!]));
    await scoreTrack(run, 0);
    const { payload } = await superUser('outbox')
      .orderBy('created_at', 'desc')
      .whereRaw(`payload ->> 'text' like ?`, [`%${run.id}%`])
      .first('payload');
    expect(payload.to).toBe(DUNE.people.underwriter.email);
    expect(payload.subject).toBe(`Run ${run.number} is complete`);
    expect(payload.text).toContain(`http://localhost:3000/runs/${run.id}`);
    expect(payload.text).toContain('not a forecast');
    expect(payload.text).not.toMatch(/S-0|USD|Warehouse/);
  });
});

describe('what goes wrong', () => {
  it('gives a failing track away: the others are charged without a minimum, the rest goes back', async () => {
    const before = await balance();
    const quote = await quoteFor(tracks);
    const run = await accept(quote);
    await scoreTrack(run, 0);
    step.before = (name) => {
      if (name === 'score') throw new Error('a defect of ours');
    };
    await expect(scoreTrack(run, 1, 0)).rejects.toThrow('a defect of ours');
    expect((await read(run)).scenarios[1]!.state).toBe('scoring');
    await scoreTrack(run, 1, 5);
    step.before = () => undefined;
    await scoreTrack(run, 2);
    const done = await read(run);
    expect(done.state).toBe('complete');
    expect(done.scenarios.map(({ state }) => state)).toEqual(['stored', 'failed', 'stored']);
    expect(done.scenarios[1]!.error).toContain('It is free');
    // 120 site–scenarios at 0.004 are 0.48; tax 7 % is 0.0336, so 0.51 altogether.
    expect(done.chargedMinor).toBe(51);
    expect(await balance()).toEqual({ free: before.free - 51, reserved: 0 });
  });

  it('charges nothing when nothing was finished', async () => {
    const before = await balance();
    const run = await accept(await quoteFor([tracks[0]!]));
    step.before = () => {
      throw new Error('a defect of ours');
    };
    await scoreTrack(run, 0, 5);
    expect(await read(run)).toMatchObject({ state: 'failed', chargedMinor: 0 });
    expect(await balance()).toEqual(before);
  });

  it('gives up on a track that keeps taking its worker down', async () => {
    const run = await accept(await quoteFor([tracks[0]!]));
    step.before = () => {
      throw new Error('must not be asked');
    };
    await scoreTrack(run, 0, 6);
    expect(await read(run)).toMatchObject({ state: 'failed', chargedMinor: 0 });
  });

  it('says what the engine refused instead of clipping it', async () => {
    const wild = gulfTrack();
    wild.fixes.forEach((fix) => Object.assign(fix, { centralPressureHpa: 700, maxWindMs: 160 }));
    const run = await accept(await quoteFor([await book.addTrack('Wild', wild)]));
    await scoreTrack(run, 0);
    const done = await read(run);
    expect(done).toMatchObject({ state: 'failed', chargedMinor: 0 });
    expect(done.scenarios[0]!.error).toMatch(/^No result: .*must be/);
  });

  it('does a track again from the start after a lost worker, and a finished one never', async () => {
    const run = await accept(await quoteFor([tracks[0]!]));
    const stop = new AbortController();
    step.before = (name) => {
      if (name === 'score') stop.abort(new Error('the worker is stopping'));
    };
    await expect(scoreTrack(run, 0, 0, stop.signal)).rejects.toThrow('the worker is stopping');
    step.before = () => undefined;
    await scoreTrack(run, 0, 1);
    const done = await read(run);
    expect(done.scenarios[0]).toMatchObject({ state: 'stored', restarts: 1 });
    step.before = () => {
      throw new Error('must not be asked');
    };
    await scoreTrack(run, 0, 2);
    expect(await read(run)).toEqual(done);
    expect(await charges(run.id)).toHaveLength(2);
  });

  it('stores one result when two workers hold the same track', async () => {
    const run = await accept(await quoteFor([tracks[0]!]));
    await Promise.all([scoreTrack(run, 0), scoreTrack(run, 0, 1)]);
    expect(await superUser('site_results').where({ run_scenario_id: run.scenarios[0]!.id })).toHaveLength(60);
    expect((await charges(run.id)).map(({ kind }) => kind)).toEqual(['reserve', 'charge']);
  });
});

describe('cancelling', () => {
  it('before anything began costs nothing', async () => {
    const before = await balance();
    const run = await accept(await quoteFor(tracks));
    const cancelled = Run.parse((await underwriter.post(`/runs/${run.id}/cancel`).expect(200)).body);
    expect(cancelled).toMatchObject({ state: 'cancelled', chargedMinor: 0 });
    expect(await balance()).toEqual(before);
    await scoreTrack(run, 0);
    expect(await read(run)).toMatchObject({ state: 'cancelled', scenariosDone: 0 });
    const again = await underwriter.post(`/runs/${run.id}/cancel`).expect(409);
    expect(again.body.code).toBe('run_finished');
  });

  it('keeps and charges what is finished, with the minimum, and stops what is under way', async () => {
    const before = await balance();
    const run = await accept(await quoteFor(tracks));
    await scoreTrack(run, 0);
    step.before = async (name) => {
      if (name === 'storm') await underwriter.post(`/runs/${run.id}/cancel`).expect(200);
    };
    await scoreTrack(run, 1);
    const done = await read(run);
    expect(done.scenarios.map(({ state }) => state)).toEqual(['stored', 'cancelled', 'cancelled']);
    // Minimum 5.00 and 7 % tax.
    expect(done).toMatchObject({ state: 'cancelled', chargedMinor: 535 });
    expect(await balance()).toEqual({ free: before.free - 535, reserved: 0 });
  });
});

describe('a quote', () => {
  it('expires by the clock', async () => {
    const quote = await quoteFor([tracks[0]!]);
    clock.pass(24 * 3_600_000);
    expect((await underwriter.get(`/quotes/${quote.id}`).expect(200)).body.state).toBe('expired');
    expect((await underwriter.post(`/quotes/${quote.id}/accept`).expect(409)).body.code).toBe('quote_expired');
  });
});
