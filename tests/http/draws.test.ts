import { describe, expect, it } from 'vitest';
import { Draws, DrawSites } from '#contract/draws.ts';
import { Footprint, ResultPoints, Run, SitesPage } from '#contract/runs.ts';
import { CHANCE_LEVELS, GUST_LEVELS } from '../../api/compute/bands.ts';
import { DEFAULT_LIMITS } from '../../api/http/limits.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { REEF } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const asked: string[] = [];
const { container, database, signIn } = await createTestApp({
  pool: inlinePool({ draws: true, before: (name) => asked.push(name) }),
});
const book = await addRunFixture(database, { sites: 60, near: 50 });
const underwriter = await signIn('underwriter');
const version = await book.addTrack('Varrow', gulfTrack());

const finished = async (mesovortices: boolean): Promise<Run> => {
  const request = book.request([version]);
  const options = { ...request.options, mesovortices };
  const quote = (await underwriter.post('/quotes', { ...request, options }).expect(201)).body;
  const run = Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
  await container.scoreJob.run({
    data: { orgId: book.org.id, runId: run.id, runScenarioId: run.scenarios[0]!.id },
    restarts: 0,
    signal: new AbortController().signal,
  });
  return Run.parse((await underwriter.get(`/runs/${run.id}`).expect(200)).body);
};
const run = await finished(true);
const plainRun = await finished(false);
const baseOf = ({ id, scenarios }: Run) => `/runs/${id}/scenarios/${scenarios[0]!.id}`;
const base = baseOf(run);
const plainBase = baseOf(plainRun);
const result = run.scenarios[0]!.result!;
const draws = Draws.parse((await underwriter.get(`${base}/draws`).expect(200)).body);
const picture = async (query: string, at = base): Promise<Footprint> =>
  Footprint.parse((await underwriter.get(`${at}/footprint?${query}`).expect(200)).body);
const sitesIn = async (draw: number, at = base): Promise<DrawSites> =>
  DrawSites.parse((await underwriter.get(`${at}/draws/${draw}/sites`).expect(200)).body);

describe('the draws of a track', () => {
  it('are 264, in the order of event gross, with weights that sum to one', () => {
    expect(draws.draws.map(({ draw }) => draw).toSorted((a, b) => a - b)).toEqual(
      Array.from({ length: 264 }, (_, d) => d + 1),
    );
    expect(draws.draws.map(({ rank }) => rank)).toEqual(Array.from({ length: 264 }, (_, i) => i + 1));
    const gross = draws.draws.map(({ grossMinor }) => grossMinor);
    expect(gross).toEqual(gross.toSorted((a, b) => a - b));
    expect(draws.draws.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(1, 12);
    expect(draws.reason).toBeNull();
    // Strength is the slow index: 24 starting phases each, half a step off the crest.
    const first = draws.draws.find(({ draw }) => draw === 1)!;
    expect(first).toMatchObject({ strength: 0.2, phaseDeg: 7.5, weight: 150 / 24_000 });
    expect(draws.draws.find(({ draw }) => draw === 264)).toMatchObject({ strength: 1.1, phaseDeg: 352.5 });
  });

  it('name those at which the event reaches its percentiles, and tie with the run', () => {
    const grossOf = (number: number) => draws.draws.find(({ draw }) => draw === number)!.grossMinor;
    const { p5, p50, p95 } = draws.named!;
    expect([grossOf(p5), grossOf(p50), grossOf(p95)]).toEqual([result.gross!.p5, result.gross!.p50, result.gross!.p95]);
    const strongest = draws.draws.map(({ strongestMs }) => strongestMs!);
    expect(Math.max(...strongest)).toBeGreaterThanOrEqual(result.peakGustMs.p95);
    expect(Math.min(...strongest)).toBeLessThanOrEqual(result.peakGustMs.p5);
  });

  it('are none where the layer is off, with the reason', async () => {
    const none = Draws.parse((await underwriter.get(`${plainBase}/draws`).expect(200)).body);
    expect(none).toMatchObject({ draws: [], named: null, reason: expect.stringContaining('layer is off') });
  });

  it('know only their loss in a run stored before the rest was kept', async () => {
    await database
      .superUser('event_results')
      .where({ run_scenario_id: run.scenarios[0]!.id })
      .update({ strongest: null, sites_above: null });
    const older = Draws.parse((await underwriter.get(`${base}/draws`).expect(200)).body);
    expect(older.draws[0]).toEqual({ ...draws.draws[0], strongestMs: null, sitesAbove: null });
  });
});

describe('the sites in a draw', () => {
  it('are those the draw changes; counted with the others they give the stored count', async () => {
    const points = ResultPoints.parse((await underwriter.get(`${base}/points`).expect(200)).body);
    for (const draw of [1, draws.named!.p50, 264]) {
      const sites = await sitesIn(draw);
      expect(sites.siteNo.length).toBeGreaterThan(0);
      expect(sites.siteNo).toEqual(sites.siteNo.toSorted((a, b) => a - b));
      const gusts = new Map(points.siteNo.map((siteNo, i) => [siteNo, points.plainMs[i]!]));
      sites.siteNo.forEach((siteNo, i) => gusts.set(siteNo, sites.gustMs[i]!));
      const { sitesAbove, strongestMs } = draws.draws.find((one) => one.draw === draw)!;
      const all = [...gusts.values()].filter((gust) => gust !== null);
      expect([40, 50].map((gustMs) => all.filter((gust) => gust >= gustMs).length)).toEqual(sitesAbove);
      // Plain gusts are stored as 4-byte numbers.
      expect(Math.abs(Math.max(...all) - strongestMs!)).toBeLessThan(4e-6);
    }
  });

  it('lie within their own range as often as it says', async () => {
    const { items } = SitesPage.parse((await underwriter.get(`${base}/sites?sort=p95&limit=1`).expect(200)).body);
    const { siteNo, p5Ms, p95Ms, plainMs } = items[0]!;
    let inside = 0;
    let total = 0;
    // Every eleventh draw is a sample over strengths and phases.
    for (let draw = 1; draw <= 264; draw += 11) {
      const { siteNo: changed, gustMs } = await sitesIn(draw);
      const gust = changed.includes(siteNo) ? gustMs[changed.indexOf(siteNo)]! : plainMs!;
      const { weight } = draws.draws.find((one) => one.draw === draw)!;
      total += weight;
      if (gust >= p5Ms! - 4e-6 && gust <= p95Ms! + 4e-6) inside += weight;
    }
    expect(inside / total).toBeGreaterThan(0.8);
  });

  it('are none where the layer is off', async () => {
    expect(await sitesIn(117, plainBase)).toMatchObject({ siteNo: [], gustMs: [], reason: null });
  });

  it('do not exist for a draw beyond the last', async () => {
    for (const draw of ['0', '265', '1.5', 'first']) {
      expect((await underwriter.get(`${base}/draws/${draw}/sites`).expect(404)).body.code).toBe('not_found');
    }
  });
});

it('limits how many pictures one address asks for, not how often it reads what is stored', async () => {
  const few = await createTestApp({
    pool: inlinePool(),
    limits: { ...DEFAULT_LIMITS, draws: { windowMs: 60_000, requests: 2 } },
  });
  const person = await few.signIn('underwriter');
  const nothing = `/runs/${run.id}/scenarios/${run.id}`;
  const statuses = async (path: string) => {
    const replies = [await person.get(path), await person.get(path), await person.get(path)];
    return replies.map(({ status }) => status);
  };
  expect(await statuses(`${nothing}/footprint?view=draw&draw=1`)).toEqual([404, 404, 429]);
  expect(await statuses(`${nothing}/footprint?view=plain`)).toEqual([404, 404, 404]);
  expect(await statuses(`${nothing}/draws`)).toEqual([404, 404, 404]);
});

describe('pictures worked out when asked for', () => {
  it('say what they are, on the net of the stored footprint', async () => {
    const stored = await picture('view=p90');
    const [p99, draw, chance] = [
      await picture('view=p99'),
      await picture(`view=draw&draw=${draws.named!.p95}`),
      await picture('view=chance&gustMs=45'),
    ];
    expect(p99).toMatchObject({ view: 'p99', levels: GUST_LEVELS, draw: null, gustMs: null });
    expect(draw).toMatchObject({ view: 'draw', levels: GUST_LEVELS, draw: draws.named!.p95 });
    expect(draw.definition).toContain('none is likelier for one street');
    expect(chance).toMatchObject({ view: 'chance', levels: CHANCE_LEVELS, gustMs: 45 });
    expect(chance.definition).toContain('not the chance of the storm');
    for (const footprint of [p99, draw, chance]) {
      expect(footprint.bands.features.length).toBeGreaterThan(2);
      expect(footprint.computed).toEqual(stored.computed);
      expect(footprint.notices.map(({ code }) => code)).toContain('life-safety');
    }
  });

  it('are the plain picture where the layer is off', async () => {
    const plain = await picture('view=plain', plainBase);
    const { bands } = await picture('view=draw&draw=200', plainBase);
    expect(bands).toEqual(plain.bands);
    expect((await picture('view=p99', plainBase)).bands).toEqual(plain.bands);
  });

  it('are the same bytes when asked for again, and computed once', async () => {
    const ask = () => underwriter.get(`${base}/footprint?view=draw&draw=33`).expect(200);
    const first = (await ask()).text;
    const computed = asked.filter((name) => name === 'drawBands').length;
    expect((await ask()).text).toBe(first);
    expect(asked.filter((name) => name === 'drawBands')).toHaveLength(computed);
  });

  it('need a draw that exists, and a gust on the scale', async () => {
    for (const [query, path] of [
      ['view=draw', 'draw'],
      ['view=draw&draw=0', 'draw'],
      ['view=draw&draw=265', 'draw'],
      ['view=draw&draw=2.5', 'draw'],
      ['view=chance', 'gustMs'],
      ['view=chance&gustMs=19', 'gustMs'],
      ['view=chance&gustMs=NaN', 'gustMs'],
    ]) {
      const refused = (await underwriter.get(`${base}/footprint?${query}`).expect(422)).body;
      expect([query, refused.code, refused.faults[0].path]).toEqual([query, 'invalid_request', `query.${path}`]);
    }
  });

  it('are refused politely once the engine has moved on, even those worked out before', async () => {
    await database.superUser('runs').where({ id: run.id }).update({ engine_version: 'an older one' });
    for (const path of ['footprint?view=draw&draw=33', 'footprint?view=p99', 'draws/33/sites']) {
      const refused = (await underwriter.get(`${base}/${path}`).expect(409)).body;
      expect(refused).toMatchObject({ code: 'result_not_ready', detail: expect.stringContaining('an older one') });
    }
    await underwriter.get(`${base}/draws`).expect(200);
    await picture('view=p50');
    await database.superUser('runs').where({ id: run.id }).update({ engine_version: run.engineVersion });
  });
});

describe('who sees them', () => {
  const addresses = ['draws', 'draws/5/sites', 'footprint?view=draw&draw=5', 'footprint?view=chance&gustMs=40'];

  it('answers strangers as if nothing were there, also what was worked out before', async () => {
    await picture('view=draw&draw=5');
    const stranger = await signIn('underwriter', { org: REEF });
    for (const address of addresses) {
      expect((await stranger.get(`${base}/${address}`).expect(404)).body.code).toBe('not_found');
    }
  });

  it('shows them to modelers and auditors, not to account admins', async () => {
    const [auditor, modeler, admin] = [await signIn('auditor'), await signIn('modeler'), await signIn('admin')];
    for (const address of addresses) {
      await auditor.get(`${base}/${address}`).expect(200);
      await modeler.get(`${base}/${address}`).expect(200);
      expect((await admin.get(`${base}/${address}`).expect(403)).body.code).toBe('not_allowed');
    }
  });
});
