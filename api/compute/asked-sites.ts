import type { EvaluationRequest } from '#contract/evaluations.ts';
import type { SiteBatch } from '#engine/footprint/site-peaks.ts';
import { fetchBySector, isLand, type LandIndex } from '#engine/geo/land.ts';
import { SECTOR_COUNT } from '#engine/terrain/fetch.ts';
import { topographicFactor } from '#engine/terrain/topography.ts';

type AskedSite = EvaluationRequest['sites'][number];

/** The ground of a site that came with a request, and what was assumed about it, by field. */
export type Ground = {
  /** NaN at sea. */
  readonly roughnessM: number;
  readonly fetchM: Float64Array;
  readonly topographicFactor: number;
  readonly filled: Readonly<Record<string, string>>;
};

const OPEN_COUNTRY = 0.03;

/** What the request leaves open about the ground comes from the land polygons. */
export const groundOf = (site: AskedSite, land: () => LandIndex): Ground => {
  const filled: Record<string, string> = {};
  const speedUp = speedUpOf(site);
  if (site.hill) filled.topographicFactor = `${speedUp.toFixed(3)}, ASCE 7, ${site.hill.shape}`;
  let roughness = site.roughnessLengthM;
  if (roughness === undefined) {
    const onLand = isLand(land(), site.latitude, site.longitude);
    roughness = onLand ? OPEN_COUNTRY : null;
    filled.roughnessLengthM = onLand ? 'open country, 0.03 m, assumed' : 'at sea: outside the land polygons';
  }
  if (roughness === null) {
    return { roughnessM: NaN, fetchM: new Float64Array(SECTOR_COUNT), topographicFactor: speedUp, filled };
  }
  if (site.fetchM !== null) {
    return { roughnessM: roughness, fetchM: Float64Array.from(site.fetchM), topographicFactor: speedUp, filled };
  }
  filled.fetchM = 'land polygons';
  const fetchM = fetchBySector(land(), site.latitude, site.longitude, new Float64Array(SECTOR_COUNT));
  return { roughnessM: roughness, fetchM, topographicFactor: speedUp, filled };
};

/** Height above ground of every gust of the chain [m]. */
const GUST_HEIGHT = 10;

const speedUpOf = ({ topographicFactor: given, hill }: AskedSite): number => {
  if (hill === null) return given ?? 1;
  const { shape, heightM: height, halfLengthM: halfLength, distanceM: distance, exposure } = hill;
  return topographicFactor({ shape, height, halfLength, distance, siteHeight: GUST_HEIGHT, exposure });
};

/** Sites of a request as the kernel takes them. */
export const batchOfSites = (sites: readonly AskedSite[], ground: readonly Ground[]): SiteBatch => {
  const column = (pick: (site: AskedSite, i: number) => number) => Float64Array.from(sites, pick);
  const fetchM = new Float64Array(SECTOR_COUNT * sites.length);
  ground.forEach(({ fetchM: fetch }, i) => fetchM.set(fetch, SECTOR_COUNT * i));
  return {
    count: sites.length,
    latitude: column(({ latitude }) => latitude),
    longitude: column(({ longitude }) => longitude),
    roughnessM: column((_, i) => ground[i]!.roughnessM),
    fetchM,
    topographicFactor: column((_, i) => ground[i]!.topographicFactor),
    value: column(({ value }) => value ?? NaN),
    deductible: column(({ deductible }) => deductible ?? 0),
    limit: column(({ limit }) => limit ?? Infinity),
  };
};
