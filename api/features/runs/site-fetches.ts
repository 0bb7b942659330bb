import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import type { EnginePool } from '../../compute/pool.ts';
import type { Transact } from '../../transact.ts';
import type { RunSite } from './run-ports.ts';
import type { SiteFetchStore } from './site-fetch-store.ts';

interface Parts {
  transact: Transact;
  fetches: SiteFetchStore;
  pool: EnginePool;
}

/** Overland distances of a chunk of sites: those known from an earlier run, and the rest measured and kept. */
export async function chunkFetches(
  { transact, fetches, pool }: Parts,
  orgId: string,
  editionId: string,
  sites: readonly RunSite[],
  signal: AbortSignal,
): Promise<Float64Array> {
  const fetchM = new Float64Array(SECTOR_COUNT * sites.length);
  const known = await transact(orgId, (tx) =>
    fetches.read(tx, orgId, editionId, sites[0]!.siteNo, sites.at(-1)!.siteNo),
  );
  const unknown: number[] = [];
  sites.forEach(({ siteNo, roughnessM }, i) => {
    const stored = known.get(siteNo);
    if (stored) fetchM.set(stored, SECTOR_COUNT * i);
    else if (roughnessM !== null) unknown.push(i);
  });
  if (unknown.length === 0) return fetchM;
  const column = (pick: (site: RunSite) => number) => Float64Array.from(unknown, (i) => pick(sites[i]!));
  const task = { latitude: column(({ latitude }) => latitude), longitude: column(({ longitude }) => longitude) };
  const measured = await pool.run('overland', task, signal);
  unknown.forEach((i, n) => {
    fetchM.set(measured.subarray(SECTOR_COUNT * n, SECTOR_COUNT * (n + 1)), SECTOR_COUNT * i);
  });
  const siteNos = unknown.map((i) => sites[i]!.siteNo);
  await transact(orgId, (tx) => fetches.save(tx, orgId, editionId, siteNos, measured));
  return fetchM;
}
