import type { Net } from '#engine/footprint/grid.ts';
import type { Area } from '#engine/footprint/strong-wind-area.ts';
import type { Tx } from '../../transact.ts';

/** What each of the 264 draws did to the event; runs stored before it was kept know only the loss. */
export interface EventDraws {
  /** [currency units] */
  gross: number[];
  /** [m/s] */
  strongest: number[] | null;
  /** Gust by gust, a draw each. */
  sitesAbove: number[] | null;
}

/** A site as far as its gust goes. */
export interface GustSite {
  siteNo: number;
  latitude: number;
  longitude: number;
  /** Null at sea. */
  roughnessM: number | null;
}

/** What the results of a track say about its draws. */
export class DrawStore {
  async event(tx: Tx, orgId: string, runScenarioId: string): Promise<EventDraws> {
    return tx('event_results')
      .where({ org_id: orgId, run_scenario_id: runScenarioId })
      .first<EventDraws>({ gross: 'gross', strongest: 'strongest', sitesAbove: 'sites_above' });
  }

  /** Where the footprint was worked out; null when the storm never reaches the lowest band. */
  async net(tx: Tx, orgId: string, runScenarioId: string): Promise<Net | null> {
    const row = await tx('footprints')
      .where({ org_id: orgId, run_scenario_id: runScenarioId })
      .first<{ net: Net } | undefined>(tx.raw(`grid - array['plain', 'p50', 'p90'] as net`));
    return row?.net ?? null;
  }

  /** Scored sites of an edition inside a rectangle whose longitudes run on, in site order. */
  async sitesWithin(
    tx: Tx,
    orgId: string,
    editionId: string,
    { west, south, east, north }: Area,
    most: number,
  ): Promise<GustSite[]> {
    const centre = (west + east) / 2;
    return tx('sites')
      .where({ org_id: orgId, edition_id: editionId })
      .whereIn('state', ['ready', 'notes'])
      .whereBetween('latitude', [south, north])
      .whereRaw('longitude + 360 * round(((? - longitude) / 360)::numeric) between ? and ?', [centre, west, east])
      .orderBy('site_no')
      .limit(most)
      .select<GustSite[]>({
        siteNo: 'site_no',
        latitude: 'latitude',
        longitude: 'longitude',
        roughnessM: 'roughness_m',
      });
  }
}
