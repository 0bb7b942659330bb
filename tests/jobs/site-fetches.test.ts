import { beforeAll, describe, expect, it } from 'vitest';
import { Run, SiteDetail } from '#contract/runs.ts';
import { fetchBySector } from '#engine/geo/land.ts';
import { landDigest } from '../../api/compute/land-digest.ts';
import { landIndex } from '../../api/compute/land.ts';
import type { Tasks } from '../../api/compute/protocol.ts';
import { createTestApp } from '../helpers/app.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { DUNE } from '../helpers/people.ts';
import { addRunFixture } from '../helpers/run-fixture.ts';

let asked: (keyof Tasks)[] = [];
const { container, database, signIn } = await createTestApp({
  pool: inlinePool({ before: (name) => asked.push(name) }),
});
const { superUser } = database;
const book = await addRunFixture(database, { sites: 30, balanceMinor: 1_000_000 });
const track = await book.addTrack('Aster');
const underwriter = await signIn('underwriter');

const scoreOnce = async (): Promise<{ run: Run; digest: string }> => {
  const quote = (await underwriter.post('/quotes', book.request([track])).expect(201)).body;
  const { id, scenarios } = (await underwriter.post(`/quotes/${quote.id}/accept`).expect(201)).body;
  const data = { orgId: DUNE.id, runId: id, runScenarioId: scenarios[0].id };
  asked = [];
  await container.scoreJob.run({ data, restarts: 0, signal: new AbortController().signal });
  const run = Run.parse((await underwriter.get(`/runs/${id}`).expect(200)).body);
  const { result_digest: digest } = await superUser('run_scenarios')
    .where({ id: scenarios[0].id })
    .first('result_digest');
  return { run, digest };
};
type Row = { site_no: number; land_digest: string; fetch_m: number[] };
const rows = (): Promise<Row[]> => superUser('site_fetches').where({ edition_id: book.editionId }).orderBy('site_no');

let measured: Awaited<ReturnType<typeof scoreOnce>>;
beforeAll(async () => {
  measured = await scoreOnce();
});

describe('overland distances of an edition', () => {
  it('are kept the first time it is scored, to the last bit', async () => {
    expect(asked).toContain('overland');
    const stored = await rows();
    const sites = await superUser('sites').where({ edition_id: book.editionId }).orderBy('site_no');
    expect(stored).toHaveLength(sites.length);
    for (const [i, { latitude, longitude }] of sites.entries()) {
      const fresh = fetchBySector(landIndex(), latitude, longitude, new Float64Array(8));
      expect(stored[i]!.fetch_m).toEqual([...fresh]);
      expect(stored[i]!.land_digest).toBe(landDigest());
    }
    expect(stored.some(({ fetch_m: fetchM }) => fetchM.some((metres) => metres > 0 && metres < 100_000))).toBe(true);
  });

  it('are not measured again, and the results are the same bits', async () => {
    const again = await scoreOnce();
    expect(asked).not.toContain('overland');
    expect(again.digest).toBe(measured.digest);
  });

  it('are measured again where they are missing', async () => {
    await superUser('site_fetches').where('site_no', '>', 12).delete();
    const again = await scoreOnce();
    expect(asked).toContain('overland');
    expect(again.digest).toBe(measured.digest);
    expect(await rows()).toHaveLength(30);
  });

  it('of other polygons are dropped, not used', async () => {
    await superUser('site_fetches').update({ land_digest: 'of older polygons', fetch_m: new Array(8).fill(1) });
    const again = await scoreOnce();
    expect(again.digest).toBe(measured.digest);
    expect(new Set((await rows()).map((row) => row.land_digest))).toEqual(new Set([landDigest()]));
  });

  it('explain a site with what it was scored with, cached or not', async () => {
    const { id, scenarios } = measured.run;
    const path = `/runs/${id}/scenarios/${scenarios[0]!.id}/sites/7`;
    const cached = SiteDetail.parse((await underwriter.get(path).expect(200)).body);
    await superUser('site_fetches').delete();
    expect(SiteDetail.parse((await underwriter.get(path).expect(200)).body)).toEqual(cached);
  });
});
