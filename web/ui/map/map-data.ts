import type { MultiPolygon } from 'geojson';
import { longitudeNear, type Bounds, type LonLat } from './geography.ts';

export type MapView = 'plain' | 'p50' | 'p90' | 'p99' | 'difference' | 'draw' | 'chance';
export type SiteState = 'ready' | 'notes' | 'held' | 'set_aside';

/** Sites in columns, as they travel. */
export interface MapSites {
  siteNo: readonly number[];
  ref: readonly string[];
  longitude: readonly number[];
  latitude: readonly number[];
  tivMinor: readonly number[];
  state: readonly SiteState[];
  plainMs: readonly (number | null)[];
  p5Ms: readonly (number | null)[];
  p95Ms: readonly (number | null)[];
}

export interface MapBands {
  view: MapView;
  /** Lower edges, ascending. */
  levels: readonly number[];
  features: readonly { properties: { level: number }; geometry: MultiPolygon }[];
  /** Bounds of the bands, and of the rectangle that was worked out. */
  bbox?: Bounds;
  computed?: Bounds | null;
}

export interface TrackTime {
  time: string;
  longitude: number;
  latitude: number;
}

export interface MapTrack {
  /** Continuous longitudes. */
  path: readonly LonLat[];
  times: readonly TrackTime[];
}

/** Above this many in view, sites are counted in cells. */
export const MAX_SITES_IN_VIEW = 3000;
const CELL_PX = 56;
export const SITE_SIZES = 5;

/** Indices of the sites inside the bounds, whichever way their longitude is written. */
export const sitesInView = (sites: MapSites, [west, south, east, north]: Bounds): number[] => {
  const centre = (west + east) / 2;
  const found: number[] = [];
  for (let index = 0; index < sites.siteNo.length; index += 1) {
    const latitude = sites.latitude[index]!;
    if (latitude < south || latitude > north) continue;
    const longitude = longitudeNear(sites.longitude[index]!, centre);
    if (longitude >= west && longitude <= east) found.push(index);
  }
  return found;
};

/** 0 for the smallest to SITE_SIZES − 1: the mark's area follows the value. */
export const sizeClass = (value: number, largest: number): number =>
  largest <= 0 ? 0 : Math.min(SITE_SIZES - 1, Math.floor(SITE_SIZES * Math.sqrt(Math.max(0, value) / largest)));

export interface CountCell {
  longitude: number;
  latitude: number;
  sites: number;
  tivMinor: number;
}

/** Sites counted in square cells of the screen; each cell stands at the middle of its sites. */
export const countCells = (
  sites: MapSites,
  indices: readonly number[],
  project: (point: LonLat) => { x: number; y: number },
): CountCell[] => {
  const cells = new Map<string, CountCell>();
  for (const index of indices) {
    const longitude = sites.longitude[index]!;
    const latitude = sites.latitude[index]!;
    const { x, y } = project([longitude, latitude]);
    const key = `${Math.floor(x / CELL_PX)}:${Math.floor(y / CELL_PX)}`;
    const cell = cells.get(key) ?? { longitude: 0, latitude: 0, sites: 0, tivMinor: 0 };
    const near = cell.sites === 0 ? longitude : longitudeNear(longitude, cell.longitude / cell.sites);
    cell.longitude += near;
    cell.latitude += latitude;
    cell.sites += 1;
    cell.tivMinor += sites.tivMinor[index]!;
    cells.set(key, cell);
  }
  return [...cells.values()].map((cell) => ({
    ...cell,
    longitude: cell.longitude / cell.sites,
    latitude: cell.latitude / cell.sites,
  }));
};

/** A site's strongest gust, for walking through sites and for the twin. */
export const leadingGust = (sites: MapSites, index: number): number => sites.p95Ms[index] ?? sites.plainMs[index] ?? -1;

/** Indices by gust, strongest first. */
export const byGust = (sites: MapSites, indices: readonly number[]): number[] =>
  [...indices].sort((a, b) => leadingGust(sites, b) - leadingGust(sites, a) || a - b);
