import { feature } from 'topojson-client';
import type { GeometryCollection, Topology } from 'topojson-specification';
import type { Position } from 'geojson';
import { useSyncExternalStore } from 'react';
import coarseUrl from 'world-atlas/land-110m.json?url';
import fineUrl from 'world-atlas/land-50m.json?url';
import finestUrl from 'world-atlas/land-10m.json?url';

export type LandDetail = 'coarse' | 'fine' | 'finest';
/** One polygon a land mass: outer ring, then lakes; longitudes continuous along each ring. */
export type LandPolygons = Position[][][];

const POLE_EDGE = 90;

/**
 * The land of the atlas is stitched for a sphere: rings cross ±180 by jumping. On a flat map each ring must run on
 * instead, and one that goes round the pole is closed along it.
 */
export const unwrapRing = (ring: readonly Position[]): Position[] => {
  let turn = 0;
  const run = ring.map(([longitude = 0, latitude = 0], index) => {
    const before = ring[index - 1]?.[0];
    if (before !== undefined && longitude - before > 180) turn -= 360;
    if (before !== undefined && longitude - before < -180) turn += 360;
    return [longitude + turn, latitude] as Position;
  });
  const first = run[0];
  const last = run.at(-1);
  if (!first || !last || Math.abs(last[0]! - first[0]!) < 180) return run;
  const pole = last[1]! < 0 ? -POLE_EDGE : POLE_EDGE;
  return [...run, [last[0]!, pole], [first[0]!, pole], first];
};

const middle = (ring: readonly Position[]): number => {
  let [west, east] = [Infinity, -Infinity];
  for (const [longitude = 0] of ring) [west, east] = [Math.min(west, longitude), Math.max(east, longitude)];
  return (west + east) / 2;
};

/** A lake runs on by itself and may end a turn away from its land; it goes back into it. */
const unwrapPolygon = ([outer = [], ...lakes]: readonly Position[][]): Position[][] => {
  const land = unwrapRing(outer);
  const centre = middle(land);
  return [
    land,
    ...lakes.map((lake) => {
      const ring = unwrapRing(lake);
      const shift = 360 * Math.round((centre - middle(ring)) / 360);
      return ring.map(([longitude = 0, latitude = 0]) => [longitude + shift, latitude] as Position);
    }),
  ];
};

type LandTopology = Topology<{ land: GeometryCollection }>;

export const landPolygons = (topology: LandTopology): LandPolygons =>
  feature(topology, topology.objects.land).features.flatMap(({ geometry }) => {
    if (geometry.type === 'Polygon') return [unwrapPolygon(geometry.coordinates)];
    if (geometry.type === 'MultiPolygon') return geometry.coordinates.map(unwrapPolygon);
    return [];
  });

const URLS: Record<LandDetail, string> = { coarse: coarseUrl, fine: fineUrl, finest: finestUrl };
const loading = new Map<LandDetail, Promise<LandPolygons>>();
const loaded = new Map<LandDetail, LandPolygons>();
const listeners = new Set<() => void>();

/** The land of one detail, fetched once. */
export const loadLand = (detail: LandDetail): Promise<LandPolygons> => {
  let land = loading.get(detail);
  if (!land) {
    land = fetch(URLS[detail])
      .then((response) => response.json() as Promise<LandTopology>)
      .then((topology) => {
        const polygons = landPolygons(topology);
        loaded.set(detail, polygons);
        for (const listener of listeners) listener();
        return polygons;
      });
    // A failed read may be asked for again.
    land.catch(() => loading.delete(detail));
    loading.set(detail, land);
  }
  return land;
};

const subscribe = (listener: () => void) => {
  listeners.add(listener);
  // A picture without land still shows its track.
  loadLand('coarse').catch(() => undefined);
  return () => listeners.delete(listener);
};

/** Coarse land for small pictures; null until it is there. */
export const useCoarseLand = (): LandPolygons | null =>
  useSyncExternalStore(subscribe, () => loaded.get('coarse') ?? null);
