import type { Fix, IntakeRow, SitePoints } from '#contract/portfolios.ts';
import type { z } from 'zod';
import { boundsOf, padBounds, type Bounds } from '../../ui/map/geography.ts';
import type { MapSites } from '../../ui/map/map-data.ts';
import { placeAfter } from './fix-preview.ts';

type Points = z.infer<typeof SitePoints>;

/** Gusts come with a run; here only places, values and states are drawn. */
const withoutGusts = (
  sites: Pick<MapSites, 'siteNo' | 'ref' | 'longitude' | 'latitude' | 'tivMinor' | 'state'>,
): MapSites => {
  const none = sites.siteNo.map(() => null);
  return { ...sites, plainMs: none, p5Ms: none, p95Ms: none };
};

export const sitesOf = (points: Points): MapSites => withoutGusts(points);

export const boundsOfSites = (sites: MapSites): Bounds | null => {
  const points = sites.longitude.map((longitude, index) => [longitude, sites.latitude[index]!] as const);
  // A held row is often held because its place is wrong; it must not decide what is in view.
  const placed = points.filter((_, index) => sites.state[index] !== 'held');
  const bounds = boundsOf(placed.length > 0 ? placed : points);
  return bounds && padBounds(bounds, 0.08, 0.05);
};

const ON_TOP_MS = 10_000;

const degrees = (text: string): number => Number(text.trim().replace('−', '-').replace(',', '.'));

/** Rows where a fix would put them, as diamonds, among the other sites, as small circles. */
export const previewSites = (rows: readonly IntakeRow[], fix: Fix, others: Points | undefined): MapSites | null => {
  const moved = rows.flatMap((row) => {
    const after = placeAfter(row, fix);
    const latitude = after ? degrees(after.latitude) : NaN;
    const longitude = after ? degrees(after.longitude) : NaN;
    return Math.abs(latitude) <= 90 && Math.abs(longitude) <= 180 ? [{ row, latitude, longitude }] : [];
  });
  if (moved.length === 0) return null;
  const kept = (others?.siteNo ?? []).map((_, index) => index).filter((index) => others!.state[index] !== 'held');
  const pick = <T>(column: readonly T[] | undefined) => kept.map((index) => column![index]!);
  const sites = withoutGusts({
    siteNo: [...pick(others?.siteNo), ...moved.map(({ row }) => row.row)],
    ref: [...pick(others?.ref), ...moved.map(({ row }) => row.siteRef ?? `Row ${row.row}`)],
    latitude: [...pick(others?.latitude), ...moved.map(({ latitude }) => latitude)],
    longitude: [...pick(others?.longitude), ...moved.map(({ longitude }) => longitude)],
    tivMinor: [...kept.map(() => 0), ...moved.map(() => 1)],
    state: [...kept.map(() => 'ready' as const), ...moved.map(() => 'notes' as const)],
  });
  // The canvas lays strong gusts on top; that is how the moved rows stay above the others.
  return { ...sites, plainMs: [...kept.map(() => null), ...moved.map(() => ON_TOP_MS)] };
};
