import { parse } from 'csv-parse/sync';
import { expect, it } from 'vitest';
import { Run, SiteDetail, SitesPage } from '#contract/runs.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { addRunFixture, gulfTrack } from '../helpers/run-fixture.ts';

const { container, database, signIn } = await createTestApp({ pool: inlinePool() });
const book = await addRunFixture(database, { sites: 20 });
const underwriter = await signIn('underwriter');
const LABEL = 'Conditioned on 5 observed vortices at 2026-09-03 09:00 UTC';

const runOf = async (name: string, mesovortices: boolean) => {
  const track = await book.addTrack(name, {
    ...gulfTrack(),
    vortices: [
      {
        kind: 'maxima',
        time: '2026-09-03T09:00:00.000Z',
        azimuthsDeg: [5, 77, 149, 221, 293],
        uncertaintyDeg: 6,
      },
    ],
  });
  const { options, ...asked } = book.request([track]);
  const request = { ...asked, options: { ...options, mesovortices } };
  const { id } = (await underwriter.post('/quotes', request).expect(201)).body as { id: string };
  const { id: runId, scenarios } = Run.parse((await underwriter.post(`/quotes/${id}/accept`).expect(201)).body);
  await container.scoreJob.run({
    data: { orgId: DUNE.id, runId, runScenarioId: scenarios[0]!.id },
    restarts: 0,
    signal: new AbortController().signal,
  });
  return Run.parse((await underwriter.get(`/runs/${runId}`).expect(200)).body);
};

it('says on the run, at its sites and in its export that it rests on observed vortices', async () => {
  const run = await runOf('Seen', true);
  const result = run.scenarios[0]!.result!;
  expect(result.wavenumber).toBe(5);
  const [said] = result.engineNotices.filter(({ code }) => code === 'conditioned-on-observation');
  expect(said!.text).toContain(LABEL);
  const labelled = (notices: readonly { text: string }[]) => notices.some(({ text }) => text === `Seen: ${LABEL}.`);
  expect(labelled(run.notices)).toBe(true);
  const base = `/runs/${run.id}/scenarios/${run.scenarios[0]!.id}`;
  const { items, notices } = SitesPage.parse((await underwriter.get(`${base}/sites`).expect(200)).body);
  expect(labelled(notices)).toBe(true);
  // Worked out anew for one site, the chances fit the percentiles of the run.
  const site = items.find(({ reach }) => reach === 'scored')!;
  const detail = SiteDetail.parse((await underwriter.get(`${base}/sites/${site.siteNo}`).expect(200)).body);
  for (const { gustMs, chance } of detail.chanceAbove) {
    for (const [level, gust] of [
      [0.05, site.p5Ms!],
      [0.5, site.p50Ms!],
      [0.95, site.p95Ms!],
    ] as const) {
      if (gust > gustMs) expect(chance).toBeGreaterThanOrEqual(1 - level);
      else if (gust < gustMs) expect(chance).toBeLessThanOrEqual(1 - level);
    }
  }
  const csv = (await underwriter.get(`${base}/sites.csv`).expect(200)).text;
  const rows: Record<string, string>[] = parse(csv, { columns: true });
  expect(new Set(rows.map((row) => row.conditioned_on))).toEqual(new Set([`Seen: ${LABEL}.`]));
});

it('says that they are ignored where the vortex layer is off', async () => {
  const run = await runOf('Seen, layer off', false);
  expect(run.notices.map(({ code }) => code)).not.toContain('conditioned-on-observation');
  const codes = run.scenarios[0]!.result!.engineNotices.map(({ code }) => code);
  expect(codes).toContain('observations-ignored');
  expect(codes).not.toContain('conditioned-on-observation');
});
