import type { EvaluationRequest } from '#contract/evaluations.ts';
import { MOST_EVALUATED_SITES } from '#contract/evaluations.ts';
import type { SpreadReply, SpreadRequest } from '#contract/studies.ts';
import { outOfReach, reachPath } from '#engine/footprint/reach.ts';
import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { batchOfSites, groundOf } from '../../compute/asked-sites.ts';
import { MINOR_PER_UNIT } from '../../compute/minor-units.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Tx } from '../../transact.ts';
import type { StudyEditions, StudySite } from './study-ports.ts';

/** The sites of a study and how they were chosen. */
export interface StudiedSites {
  batch: SiteBatch;
  refs: string[];
  said: SpreadReply['sites'];
  currency: string | null;
}

const number = (n: number) => n.toLocaleString('en');

/** Those of the request, or the largest values of an edition within reach of the track. */
export async function studiedSites(
  tx: Tx,
  orgId: string,
  { sites, editionId }: Pick<SpreadRequest, 'sites' | 'editionId'>,
  fixes: readonly TrackFix[],
  { editions, land }: { editions: StudyEditions; land: () => LandIndex },
): Promise<StudiedSites> {
  if (sites) return askedSites(sites, land);
  const path = reachPath(fixes);
  const found = await editions.largestSites(
    tx,
    orgId,
    editionId!,
    MOST_EVALUATED_SITES,
    (latitude, longitude) => !outOfReach(path, latitude, longitude),
  );
  if (!found) throw notFound('Edition', editionId!);
  if (found.of === 0) {
    throw new AppError(
      'edition_not_ready',
      `No site of ${found.edition} is ready to be scored yet. Map its columns and wait for the checks, then try again.`,
    );
  }
  const used = found.sites.length;
  const rule =
    used === 0
      ? `None of the ${number(found.of)} sites of ${found.edition} is within 1000 km of the track.`
      : used < MOST_EVALUATED_SITES
        ? `All ${number(used)} sites within 1000 km of the track, of ${number(found.of)} ready to be scored in ${found.edition}.`
        : `The ${number(used)} largest values within 1000 km of the track, of ${number(found.of)} sites ready to be scored in ${found.edition}.`;
  return {
    batch: editionBatch(found.sites),
    refs: found.sites.map(({ ref }) => ref),
    said: { used, of: found.of, rule },
    currency: found.currency,
  };
}

const askedSites = (sites: EvaluationRequest['sites'], land: () => LandIndex): StudiedSites => ({
  batch: batchOfSites(
    sites,
    sites.map((site) => groundOf(site, land)),
  ),
  refs: sites.map(({ siteRef }) => siteRef),
  said: { used: sites.length, of: sites.length, rule: 'The sites sent with the request.' },
  currency: null,
});

/** As a run scores them; overland distances are left to the land polygons. */
export const editionBatch = (sites: readonly StudySite[]): SiteBatch => {
  const column = (pick: (site: StudySite) => number) => Float64Array.from(sites, pick);
  return {
    count: sites.length,
    latitude: column(({ latitude }) => latitude),
    longitude: column(({ longitude }) => longitude),
    roughnessM: column(({ roughnessM }) => roughnessM ?? NaN),
    fetchM: new Float64Array(SECTOR_COUNT * sites.length).fill(NaN),
    topographicFactor: new Float64Array(sites.length).fill(1),
    value: column(({ tivMinor }) => tivMinor / MINOR_PER_UNIT),
    deductible: column(({ deductibleMinor }) => deductibleMinor / MINOR_PER_UNIT),
    limit: column(({ limitMinor }) => (limitMinor === null ? Infinity : limitMinor / MINOR_PER_UNIT)),
  };
};
