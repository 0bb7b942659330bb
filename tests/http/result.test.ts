import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { ALL_ENDPOINTS } from '#contract/all.ts';
import { NOTICE_VERSION } from '#contract/notices.ts';
import { Footprint, ResultPoints, Run, RunSlip, SiteDetail, SitesPage, type SiteResult } from '#contract/runs.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE, REEF } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const HOSTILE = ['=1+2', '+1', '-1', '@x', '\t=1', '\r=1', 'plain, "quoted"', '100%_a'];
const { clock, container, database, signIn } = await createTestApp({ pool: inlinePool({ draws: true }) });
const book = await addRunFixture(database, {
  sites: 40,
  near: 30,
  label: (no) => HOSTILE[no - 1] ?? `Warehouse ${no}`,
  siteRef: (no) => (no <= 4 ? `${HOSTILE[no - 1]} ${no}` : `S-${no}`),
});
const underwriter = await signIn('underwriter');
const advisory = await book.addTrack('Advisory', gulfTrack(0, '2026-09-02T21:00:00Z'));
const quote = (await underwriter.post('/quotes', book.request([advisory])).expect(201)).body;
const accepted = Run.parse((await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body);
const early = await underwriter.get(`/runs/${accepted.id}/scenarios/${accepted.scenarios[0]!.id}/sites`);
await container.scoreJob.run({
  data: { orgId: DUNE.id, runId: accepted.id, runScenarioId: accepted.scenarios[0]!.id },
  restarts: 0,
  signal: new AbortController().signal,
});
const run = Run.parse((await underwriter.get(`/runs/${accepted.id}`).expect(200)).body);
const base = `/runs/${run.id}/scenarios/${run.scenarios[0]!.id}`;
const page = async (query = ''): Promise<SitesPage> =>
  SitesPage.parse((await underwriter.get(`${base}/sites${query}`).expect(200)).body);

it('quotes and charges only what is within reach', () => {
  expect(quote).toMatchObject({ siteScenarios: 40, outOfReach: 10, units: 30 });
  expect(run.scenarios[0]!.result).toMatchObject({ sitesScored: 30, outOfReach: 10 });
});

it('says how old the advisory was when the run was accepted, whenever it is read', async () => {
  const age = (Date.parse(run.acceptedAt) - Date.parse('2026-09-02T21:00:00Z')) / 3_600_000;
  const stated = { asOf: '2026-09-02T21:00:00.000Z', ageHoursWhenRun: age, staleWhenRun: true };
  const slipOf = async () => RunSlip.parse((await underwriter.get(`/runs/${run.id}/slip`).expect(200)).body);
  const before = await slipOf();
  expect(run.scenarios[0]).toMatchObject({ ...stated, stale: { ageHours: age } });
  expect(before.scenarios[0]).toMatchObject(stated);
  const days = `${Math.floor(age / 24)} days old when run, stale`;
  for (const { notices } of [run, before, await page()]) {
    expect(notices.find(({ code }) => code === 'provisional')!.text).toContain(days);
  }
  clock.pass(5 * 3_600_000);
  try {
    const later = Run.parse((await underwriter.get(`/runs/${run.id}`).expect(200)).body);
    expect(later.scenarios[0]).toMatchObject(stated);
    expect(later.scenarios[0]!.stale!.ageHours).toBeCloseTo(age + 5, 6);
    expect(later.notices).toEqual(run.notices);
    expect(await slipOf()).toEqual(before);
  } finally {
    clock.pass(-5 * 3_600_000);
  }
  const rows: Record<string, string>[] = parse((await underwriter.get(`${base}/sites.csv`).expect(200)).text, {
    columns: true,
  });
  expect(new Set(rows.map((row) => `${row.track_age_when_run_h} ${row.track_stale_when_run}`))).toEqual(
    new Set([`${age.toFixed(1)} stale`]),
  );
});

it('says when a track isn’t finished', () => {
  expect(early.status).toBe(409);
  expect(early.body.code).toBe('result_not_ready');
});

it('says what each class of ground would make of a site’s plain gust', async () => {
  const sites = (await page()).items.filter(({ reach }) => reach === 'scored').slice(0, 5);
  for (const { siteNo, plainMs } of sites) {
    const detail = SiteDetail.parse((await underwriter.get(`${base}/sites/${siteNo}`)).body);
    const { terrain, terrainEffects, ladder } = detail;
    expect(terrainEffects.map((effect) => [effect.terrain, effect.roughnessM])).toEqual([
      ['water_edge', 0.003],
      ['open', 0.03],
      ['suburban', 0.3],
      ['wooded', 0.5],
      ['dense_urban', 1],
    ]);
    const present = terrainEffects.filter(({ isPresent }) => isPresent);
    expect(present.map((effect) => effect.terrain)).toEqual([terrain]);
    expect(present[0]!.plainMs).toBeCloseTo(ladder.at(-1)!.afterMs, 9);
    expect(present[0]!.plainMs).toBeCloseTo(plainMs!, 5);
    // Published property: up to 0.5 m the gust doesn't rise with the roughness.
    const gusts = terrainEffects.slice(0, 4).map((effect) => effect.plainMs);
    expect(gusts).toEqual([...gusts].sort((a, b) => b - a));
  }
});

describe('the sites table', () => {
  it('holds every site with its range, largest gross first, and ties with the run', async () => {
    const { items, total, totals, notices } = await page();
    const result = run.scenarios[0]!.result!;
    expect(total).toBe(40);
    expect(totals).toMatchObject({
      tivMinor: result.tivMinor,
      grossPlainMinor: result.grossPlainMinor,
      grossMeanMinor: result.gross!.mean,
      groundUpMeanMinor: result.groundUp!.mean,
    });
    const gross = items.map(({ grossMeanMinor }) => grossMeanMinor ?? -1);
    expect(gross).toEqual([...gross].sort((a, b) => b - a));
    for (const site of items.filter(({ reach }) => reach !== 'out_of_reach')) {
      const gusts = [site.p5Ms!, site.p50Ms!, site.p90Ms!, site.p95Ms!, site.p99Ms!];
      expect(gusts).toEqual([...gusts].sort((a, b) => a - b));
      expect(site.enhancedMeanMs!).toBeGreaterThanOrEqual(site.plainMs! * (1 - 1e-6));
    }
    expect(items.filter(({ reach }) => reach === 'out_of_reach').every((site) => site.plainMs === null)).toBe(true);
    expect(notices.map(({ code }) => code)).toEqual(
      expect.arrayContaining(['life-safety', 'engineering', 'provisional']),
    );
  });

  it.each(['ref', 'tiv', 'plain', 'p50', 'p95', 'damage', 'groundUp', 'gross'])(
    'pages through every order without losing or repeating a site: %s',
    async (sort) => {
      for (const direction of ['asc', 'desc']) {
        const query = (offset: number) => `?sort=${sort}&direction=${direction}&limit=17&offset=${offset}`;
        const pages = [await page(query(0)), await page(query(17)), await page(query(34)), await page(query(51))];
        const seen = pages.flatMap(({ items }) => items.map(({ siteNo }) => siteNo));
        expect(seen.toSorted((a, b) => a - b)).toEqual(Array.from({ length: 40 }, (_, i) => i + 1));
        expect(pages[3]!.items).toEqual([]);
      }
    },
  );

  it('filters by gust and gives the totals of what is shown', async () => {
    const all = (await page('?limit=500')).items;
    const strong = (site: SiteResult) => Math.max(site.plainMs ?? 0, site.p50Ms ?? 0) >= 45;
    const { items, total, totals } = await page('?minGustMs=45&limit=500');
    expect(total).toBe(all.filter(strong).length);
    expect(total).toBeGreaterThan(0);
    expect(total).toBeLessThan(30);
    expect(items.every(strong)).toBe(true);
    expect(totals.tivMinor).toBe(all.filter(strong).reduce((sum, { tivMinor }) => sum + tivMinor, 0));
  });

  it('searches reference, label and town, and takes wildcards for themselves', async () => {
    expect((await page('?search=s-17')).items.map(({ siteNo }) => siteNo)).toEqual([17]);
    expect((await page('?search=port%20alder')).total).toBe(20);
    expect((await page('?search=100%25_a')).items.map(({ siteNo }) => siteNo)).toEqual([8]);
    expect((await page('?search=%25')).total).toBe(1);
  });
});

describe('the CSV export', () => {
  const download = async () =>
    (
      await underwriter
        .get(`${base}/sites.csv`)
        .expect(200)
        .expect('Content-Type', /text\/csv/)
    ).text;

  it('is the same bytes each time, in the edition’s order, with units in its headers and no time of export', async () => {
    const [first, second] = [await download(), await download()];
    expect(first).toBe(second);
    const rows: Record<string, string>[] = parse(first, { columns: true });
    expect(rows.map((row) => Number(row.site_no))).toEqual(Array.from({ length: 40 }, (_, i) => i + 1));
    expect(Object.keys(rows[0]!)).toEqual(
      expect.arrayContaining([
        'gust_plain_m_s',
        'gross_mean_usd',
        'latitude_deg',
        'notice_version',
        'hours_above_33_m_s',
        'track_as_of_utc',
        'track_age_when_run_h',
        'track_stale_when_run',
        'conditioned_on',
      ]),
    );
    expect(rows.every((row) => row.notice_version === NOTICE_VERSION)).toBe(true);
    expect(new Set(rows.map((row) => row.calibration_state))).toEqual(new Set(['signed']));
    expect(first).not.toMatch(/2026-12-01T/);
  });

  it('lets no text become a formula, and keeps numbers numbers', async () => {
    const rows: Record<string, string>[] = parse(await download(), { columns: true });
    const labels = rows.map((row) => row.site_label!);
    expect(labels.slice(0, 6)).toEqual(HOSTILE.slice(0, 6).map((label) => `'${label}`));
    expect(labels[6]).toBe('plain, "quoted"');
    expect(rows[0]!.site_ref).toBe(`'=1+2 1`);
    expect(Number(rows[10]!.longitude_deg)).toBeLessThan(0);
    for (const row of rows) {
      for (const [name, cell] of Object.entries(row)) {
        if (/_(usd|deg|m_s|plain|mean|p5|p95)$/.test(name)) expect(cell).toMatch(/^(-?\d+(\.\d+)?)?$/);
        else expect(cell).not.toMatch(/^[=+\-@\t\r]/);
      }
    }
  });

  it('adds up to the run, to the cent', async () => {
    const rows: Record<string, string>[] = parse(await download(), { columns: true });
    const cents = rows.reduce((sum, row) => sum + Math.round(Number(row.gross_mean_usd || 0) * 100), 0);
    expect(cents).toBe(run.scenarios[0]!.result!.gross!.mean);
  });
});

describe('one site', () => {
  it('explains its gust, and the series peaks where the score does', async () => {
    const { siteNo, plainMs, peakTime } = (await page('?sort=plain&limit=1')).items[0]!;
    const site = SiteDetail.parse((await underwriter.get(`${base}/sites/${siteNo}`).expect(200)).body);
    expect(site.ladder.map(({ key }) => key)).toEqual([
      ...['gradient', 'surface', 'motion', 'terrain', 'gust_factor', 'hills'],
    ]);
    for (const [i, { operation, amount, afterMs }] of site.ladder.entries()) {
      const from = site.ladder[i - 1]?.afterMs ?? 0;
      const expected = { start: amount, times: from * amount, plus: from + amount }[operation];
      expect(afterMs).toBeCloseTo(expected, 9);
    }
    const top = Math.max(...site.series.plain);
    // Stored as 4-byte numbers: 24 bits, so within 3e-6 m/s below 64 m/s.
    expect(Math.abs(top - plainMs!)).toBeLessThan(4e-6);
    expect(site.series.time[site.series.plain.indexOf(top)]).toBe(peakTime);
    expect(site.ladder.at(-1)!.afterMs).toBeCloseTo(top, 6);
    expect(site.series.time.length).toBeLessThanOrEqual(400);
    expect(site.fetchM).toHaveLength(8);
    expect(site.chanceAbove.map(({ gustMs }) => gustMs)).toEqual([40, 50]);
    const p5AtLeast40 = site.p5Ms! >= 40 ? 0.95 : 0;
    expect(site.chanceAbove[0]!.chance).toBeGreaterThanOrEqual(p5AtLeast40);
  });

  it('has nothing to explain out of reach, and isn’t found beyond the last', async () => {
    const site = SiteDetail.parse((await underwriter.get(`${base}/sites/40`).expect(200)).body);
    expect(site).toMatchObject({ reach: 'out_of_reach', ladder: [], plainMs: null, series: { time: [] } });
    expect((await underwriter.get(`${base}/sites/41`).expect(404)).body.code).toBe('not_found');
  });

  it('refuses politely once the engine has moved on', async () => {
    await database.superUser('runs').where({ id: run.id }).update({ engine_version: 'an older one' });
    const refused = await underwriter.get(`${base}/sites/1`).expect(409);
    expect(refused.body).toMatchObject({ code: 'result_not_ready', detail: expect.stringContaining('an older one') });
    await underwriter.get(`${base}/sites`).expect(200);
    await database.superUser('runs').where({ id: run.id }).update({ engine_version: run.engineVersion });
  });
});

it('gives points and footprints for the map', async () => {
  const points = ResultPoints.parse((await underwriter.get(`${base}/points`).expect(200)).body);
  const { items } = await page('?sort=ref&direction=asc&limit=500');
  const bySite = items.toSorted((a, b) => a.siteNo - b.siteNo);
  expect(points).toEqual({
    siteNo: bySite.map((site) => site.siteNo),
    ref: bySite.map((site) => site.siteRef),
    longitude: bySite.map((site) => site.longitude),
    latitude: bySite.map((site) => site.latitude),
    tivMinor: bySite.map((site) => site.tivMinor),
    state: bySite.map((site) => site.state),
    plainMs: bySite.map((site) => site.plainMs),
    p5Ms: bySite.map((site) => site.p5Ms),
    p95Ms: bySite.map((site) => site.p95Ms),
  });
  for (const view of ['plain', 'p50', 'p90', 'difference']) {
    const footprint = Footprint.parse((await underwriter.get(`${base}/footprint?view=${view}`).expect(200)).body);
    expect(footprint.bands.features.length).toBeGreaterThan(0);
    expect(footprint.definition).toContain('3-second gust');
  }
});

describe('who sees what', () => {
  it('answers strangers as if nothing were there', async () => {
    const stranger = await signIn('underwriter', { org: REEF });
    const own: Record<string, string> = {
      runId: run.id,
      runScenarioId: run.scenarios[0]!.id,
      quoteId: quote.id,
      siteNo: '1',
      draw: '1',
    };
    const paths = ALL_ENDPOINTS.filter(({ path }) => /:(runId|quoteId)/.test(path));
    expect(paths.length).toBeGreaterThanOrEqual(11);
    for (const { method, path } of paths) {
      const filled = path.replace(/:(\w+)/g, (_all, name: string) => own[name]!);
      const reply = await (method === 'get' ? stranger.get(filled) : stranger.post(filled));
      expect([filled, reply.status, reply.body.code]).toEqual([filled, 404, 'not_found']);
    }
    expect((await stranger.get('/runs').expect(200)).body.items).toEqual([]);
  });

  it('shows account admins that there are runs, and no sites', async () => {
    const admin = await signIn('admin');
    expect((await admin.get('/runs').expect(200)).body.items).toHaveLength(1);
    for (const path of [`/runs/${run.id}`, `${base}/sites`, `${base}/sites.csv`, `${base}/points`, `${base}/sites/1`]) {
      expect((await admin.get(path)).body.code).toBe('not_allowed');
    }
  });

  it('lets auditors read everything and start nothing', async () => {
    const auditor = await signIn('auditor');
    await auditor.get(`${base}/sites`).expect(200);
    await auditor.get(`/runs/${run.id}/slip`).expect(200);
    expect((await auditor.post('/quotes', book.request([advisory]))).body.code).toBe('not_allowed');
  });
});
