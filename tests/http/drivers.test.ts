import { describe, expect, it } from 'vitest';
import { Drivers } from '#contract/drivers.ts';
import { Problem } from '#contract/errors.ts';
import { Run, RunSlip, SitesPage } from '#contract/runs.ts';
import { SpreadReply, type SpreadRow } from '#contract/studies.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { addRunFixture } from '../helpers/run-fixture.ts';

const { container, database, signIn } = await createTestApp({ pool: inlinePool() });
const book = await addRunFixture(database, { sites: 40, near: 30 });
const underwriter = await signIn('underwriter');
const track = await book.addTrack('Aster');

const accept = async (options: object = {}) => {
  const asked = book.request([track]);
  const request = { ...asked, options: { ...asked.options, ...options } };
  const quote = (await underwriter.post('/quotes', request).expect(201)).body;
  return Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
};
const placeOf = ({ id, scenarios }: Run) => `/runs/${id}/scenarios/${scenarios[0]!.id}`;
const finish = async ({ id, scenarios }: Run) => {
  await container.scoreJob.run({
    data: { orgId: DUNE.id, runId: id, runScenarioId: scenarios[0]!.id },
    restarts: 0,
    signal: new AbortController().signal,
  });
  return Run.parse((await underwriter.get(`/runs/${id}`).expect(200)).body);
};
const driversAt = async (path: string) => Drivers.parse((await underwriter.get(`${path}/drivers`).expect(200)).body);
const row = ({ rows }: { rows: SpreadRow[] }, choice: string, value: string) =>
  rows.find((one) => one.choice === choice && one.to.value === value)!;

const accepted = await accept();
const early = await underwriter.get(`${placeOf(accepted)}/drivers`);
const run = await finish(accepted);
const result = run.scenarios[0]!.result!;
const event = await driversAt(placeOf(run));

describe('what drives an event', () => {
  it('stands on the run’s own inputs: all its sites give its own percentiles', () => {
    expect(event.sites).toEqual({ used: 30, of: 30, rule: 'All 30 sites within 1000 km of the track.' });
    expect(event.base.grossMinor).toMatchObject({
      p5: result.gross!.p5,
      p50: result.gross!.p50,
      p95: result.gross!.p95,
    });
    expect(event.base.grossMinor!.plain).toBe(result.grossPlainMinor);
    expect(event).toMatchObject({ currency: 'USD', mesovortices: true });
    expect(event.ring).toEqual({ width: [0.35, 0.35], eyeRatio: [0.2, 0.2] });
  });

  it('tries the ring and its vortices, and nothing else', () => {
    expect(event.rows.map(({ choice, to }) => `${choice} ${to.value}`).sort()).toEqual([
      'anchor mean',
      'anchor peak',
      'eyeRatio 0',
      'eyeRatio 0.4',
      'mesovortices off',
      'regime breakdown',
      'regime quasi-steady',
      'ringWidth 0.25',
      'ringWidth 0.45',
    ]);
  });

  it('gives each its sign: a thin ring, a still eye and breakdown raise the loss, their opposites lower it', () => {
    for (const [choice, up, down] of [
      ['ringWidth', '0.25', '0.45'],
      ['eyeRatio', '0', '0.4'],
      ['regime', 'breakdown', 'quasi-steady'],
    ] as const) {
      expect(row(event, choice, up).grossChangeMinor).toBeGreaterThan(0);
      expect(row(event, choice, up).peakGustChangeMs).toBeGreaterThan(0);
      expect(row(event, choice, down).grossChangeMinor).toBeLessThan(0);
    }
    const off = row(event, 'mesovortices', 'off');
    expect(off.grossMinor!.plain).toBe(result.grossPlainMinor);
    // A percentile is rounded once, a sum of plain losses site by site: half a cent for each of 30.
    expect(Math.abs(off.grossMinor!.p50 - result.grossPlainMinor)).toBeLessThanOrEqual(15);
    expect(off.grossChangeMinor).toBeLessThan(0);
    expect(row(event, 'anchor', 'peak').grossChangeMinor).toBeLessThanOrEqual(0);
  });

  it('carries the cautions of the run', () => {
    expect(event.notices).toEqual(run.notices);
  });

  it('is refused while the track isn’t finished', () => {
    expect([early.status, Problem.parse(early.body).code]).toEqual([409, 'result_not_ready']);
  });

  it('is for those who read results', async () => {
    await (await signIn('auditor')).get(`${placeOf(run)}/drivers`).expect(200);
    await (await signIn('admin')).get(`${placeOf(run)}/drivers`).expect(403);
    await (await signIn('admin')).get(`${placeOf(run)}/sites/1/drivers`).expect(403);
  });
});

describe('what drives a site', () => {
  it('starts from the site’s stored range', async () => {
    const { items } = SitesPage.parse((await underwriter.get(`${placeOf(run)}/sites?sort=gross&direction=desc`)).body);
    const { siteNo, siteRef, p5Ms, p50Ms, p95Ms, plainMs } = items[0]!;
    const site = await driversAt(`${placeOf(run)}/sites/${siteNo}`);
    expect(site.sites).toEqual({ used: 1, of: 1, rule: `Site ${siteRef} alone.` });
    expect(site.base.strongestSite).toBe(siteRef);
    const { plain, p5, p50, p95 } = site.base.peakGustMs;
    [plainMs, p5Ms, p50Ms, p95Ms].forEach((stored, i) => expect([plain, p5, p50, p95][i]).toBeCloseTo(stored!, 4));
    expect(row(site, 'regime', 'quasi-steady').peakGustMs!.p50).toBeLessThanOrEqual(p50);
  });

  it('isn’t there out of reach', async () => {
    const { items } = SitesPage.parse((await underwriter.get(`${placeOf(run)}/sites?limit=100`)).body);
    const { siteNo } = items.find(({ reach }) => reach === 'out_of_reach')!;
    for (const no of [siteNo, 4711]) {
      const reply = await underwriter.get(`${placeOf(run)}/sites/${no}/drivers`).expect(404);
      expect(Problem.parse(reply.body).code).toBe('not_found');
    }
  });
});

describe('a run in another amplitude regime', () => {
  it('gives what the switch promised, names the departure, and isn’t taken for the same run', async () => {
    const other = await finish(await accept({ regime: 'breakdown' }));
    expect(other.id).not.toBe(run.id);
    const { grossMinor } = row(event, 'regime', 'breakdown');
    expect(other.scenarios[0]!.result!.gross).toMatchObject({ p50: grossMinor!.p50, p95: grossMinor!.p95 });
    const words = 'amplitude regime: “Always breaking down” instead of “Mixed”';
    const slip = RunSlip.parse((await underwriter.get(`/runs/${other.id}/slip`).expect(200)).body);
    expect(slip.choices).toEqual([words]);
    const before = RunSlip.parse((await underwriter.get(`/runs/${run.id}/slip`).expect(200)).body);
    expect(slip.inputsDigest).not.toBe(before.inputsDigest);
    expect(JSON.stringify(other.scenarios[0]!.result!.engineNotices)).toContain(words);
    const drivers = await driversAt(placeOf(other));
    expect(row(drivers, 'regime', 'mixed').grossMinor!.p50).toBe(result.gross!.p50);
  });

  it('has the digest of before there was a choice when it is the default by name', async () => {
    const asked = book.request([track]);
    const named = { ...asked, options: { ...asked.options, regime: 'mixed' } };
    const quote = (await underwriter.post('/quotes', named).expect(201)).body;
    expect(quote.identicalRunId).toBe(run.id);
  });
});

describe('a run without vortices', () => {
  it('says why the ring does nothing, and what vortices would do', async () => {
    const plain = await finish(await accept({ mesovortices: false }));
    const drivers = await driversAt(placeOf(plain));
    expect(drivers.mesovortices).toBe(false);
    for (const { choice, reason } of drivers.rows) {
      expect(reason).toBe(choice === 'mesovortices' ? null : 'The mesovortices are off.');
    }
    expect(row(drivers, 'mesovortices', 'on').grossMinor!.p50).toBe(result.gross!.p50);
  });
});

it('a study tries the ring alone when asked', async () => {
  const { scenario_id: scenarioId } = await database
    .superUser('scenario_versions')
    .where({ id: track })
    .first('scenario_id');
  const body = { editionId: book.editionId, switches: 'ring' };
  const reply = SpreadReply.parse((await underwriter.post(`/scenarios/${scenarioId}/spread`, body).expect(200)).body);
  expect(new Set(reply.rows.map(({ choice }) => choice))).toEqual(
    new Set(['ringWidth', 'eyeRatio', 'regime', 'anchor', 'mesovortices']),
  );
});
