import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { feature } from 'topojson-client';
import type { GeometryCollection, Topology } from 'topojson-specification';
import { buildLandIndex, type LandIndex } from '#engine/geo/land.ts';
import { unwrapRing } from '#engine/geo/ring-unwrapping.ts';

let loaded: LandIndex | null = null;

/** Land polygons of the world at 1:10 million (Natural Earth), indexed once per thread. */
export function landIndex(): LandIndex {
  loaded ??= buildLandIndex(landRings());
  return loaded;
}

/** Outlines of the land polygons, laid out on the flat plane, as flat longitude, latitude pairs [deg]. */
function landRings(): Float64Array[] {
  const file = createRequire(import.meta.url).resolve('world-atlas/land-10m.json');
  const topology = JSON.parse(readFileSync(file, 'utf8')) as Topology<{ land: GeometryCollection }>;
  const rings: Float64Array[] = [];
  for (const { geometry } of feature(topology, topology.objects.land).features) {
    if (geometry.type !== 'Polygon' && geometry.type !== 'MultiPolygon') continue;
    const polygons = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates;
    for (const polygon of polygons) for (const ring of polygon) rings.push(unwrapRing(ring));
  }
  return rings;
}
