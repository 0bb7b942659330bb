import type { DrawSites } from '#contract/draws.ts';
import { GUST_EDGES_MS, GUST_STEP_MS } from '../../ui/charts/gust-scale.ts';
import type { MapSites } from '../../ui/map/map-data.ts';

/** Gust of every site in a draw, in the order of the points: plain where the draw changes nothing. */
export const gustsInDraw = (sites: MapSites, { siteNo, gustMs }: DrawSites): (number | null)[] => {
  const changed = new Map(siteNo.map((no, index) => [no, gustMs[index]!]));
  return sites.siteNo.map((no, index) => changed.get(no) ?? sites.plainMs[index] ?? null);
};

/** Sites per 5 m/s from 20 to 85 and above. */
export const sitesByGust = (gusts: readonly (number | null)[]): number[] => {
  const bins = new Array<number>(GUST_EDGES_MS.length).fill(0);
  for (const gust of gusts) {
    if (gust === null || gust < GUST_EDGES_MS[0]) continue;
    bins[Math.min(bins.length - 1, Math.floor((gust - GUST_EDGES_MS[0]) / GUST_STEP_MS))]! += 1;
  }
  return bins;
};

/** What a site's own range says of its chance to reach a gust. */
export const chanceWords = (sites: MapSites, index: number, gustMs: number): string => {
  const plain = sites.plainMs[index];
  const low = sites.p5Ms[index] ?? plain;
  const high = sites.p95Ms[index] ?? plain;
  if (low === null || low === undefined || high === null || high === undefined) return 'not scored';
  return low >= gustMs ? '95 % or more' : high < gustMs ? '5 % or less' : '5–95 %';
};
