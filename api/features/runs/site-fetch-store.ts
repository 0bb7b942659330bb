import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import type { Tx } from '../../transact.ts';

/** Overland distances by site number, eight each [m]. */
export type SiteFetches = ReadonlyMap<number, readonly number[]>;

/** Overland distances of an edition’s sites on land, measured once in the land polygons. */
export class SiteFetchStore {
  constructor(private readonly landDigest: () => string) {}

  /** Those that are known of the sites numbered from `first` to `last`. */
  async read(tx: Tx, orgId: string, editionId: string, first: number, last: number): Promise<SiteFetches> {
    const rows = await tx('site_fetches')
      .where({ org_id: orgId, edition_id: editionId, land_digest: this.landDigest() })
      .whereBetween('site_no', [first, last])
      .select<{ site_no: number; fetch_m: number[] }[]>('site_no', 'fetch_m');
    return new Map(rows.map(({ site_no: siteNo, fetch_m: fetchM }) => [siteNo, fetchM]));
  }

  /** Keeps what isn’t known yet; two workers that measured the same site measured the same. */
  async save(
    tx: Tx,
    orgId: string,
    editionId: string,
    siteNos: readonly number[],
    fetchM: Float64Array,
  ): Promise<void> {
    if (siteNos.length === 0) return;
    // The shortest decimal that reads back as the same double.
    const texts = siteNos.map((_, i) => `{${fetchM.subarray(SECTOR_COUNT * i, SECTOR_COUNT * (i + 1)).join(',')}}`);
    await tx.raw(
      `insert into site_fetches (org_id, edition_id, land_digest, site_no, fetch_m)
       select ?, ?, ?, measured.site_no, measured.fetch_m::double precision[]
       from unnest(?::integer[], ?::text[]) as measured (site_no, fetch_m)
       on conflict do nothing`,
      [orgId, editionId, this.landDigest(), [...siteNos], texts],
    );
  }

  /** Drops what was measured in other polygons or otherwise. */
  async forgetOthers(tx: Tx, orgId: string, editionId: string): Promise<void> {
    await tx('site_fetches')
      .where({ org_id: orgId, edition_id: editionId })
      .whereNot({ land_digest: this.landDigest() })
      .delete();
  }
}
