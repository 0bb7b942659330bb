import { contours } from 'd3-contour';
import type { Feature, FeatureCollection, MultiPolygon, Position } from 'geojson';
import type { FootprintGrid } from '#engine/footprint/grid.ts';

/** Lower edges of the gust bands [m/s]: the fourteen steps of the legend, the last one open upwards. */
export const GUST_LEVELS: readonly number[] = Array.from({ length: 14 }, (_, k) => 20 + 5 * k);
/** Lower edges of the difference bands [m/s]: eleven steps of 1 m/s, symmetric about the one from -0.5 to 0.5. */
export const DIFFERENCE_LEVELS: readonly number[] = Array.from({ length: 11 }, (_, k) => -5.5 + k);
/** Lower edges of the bands of a chance, in parts of one. */
export const CHANCE_LEVELS: readonly number[] = [0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95];

/** Below every level, yet finite, so that contours of different levels never share a point where the field breaks off. */
const NOTHING = -1e9;
/** Polygons smaller than this part of a grid cell are the slivers left between contours where the field breaks off. */
const SLIVER = 0.01;

export type BandView = 'plain' | 'p50' | 'p90' | 'difference';

/** Filled bands of one view; `level` is the lower edge of a band [m/s]. */
export type Bands = {
  readonly levels: readonly number[];
  /** West, south, east, north of the filled area [deg]; longitudes continuous, so east may exceed 180. */
  readonly bbox: [number, number, number, number];
  readonly bands: FeatureCollection<MultiPolygon, { level: number }>;
};

/** Filled bands of a footprint: gusts without vortices, their median and ninth decile with them, and median less plain. */
export function footprintBands(grid: FootprintGrid): Record<BandView, Bands> {
  // Where neither field reaches the lowest band there is nothing to compare.
  const difference = grid.p50.map((p50, k) =>
    Math.max(p50, grid.plain[k]!) >= GUST_LEVELS[0]! ? p50 - grid.plain[k]! : NOTHING,
  );
  return {
    plain: bandsOf(grid, grid.plain, GUST_LEVELS),
    p50: bandsOf(grid, grid.p50, GUST_LEVELS),
    p90: bandsOf(grid, grid.p90, GUST_LEVELS),
    difference: bandsOf(grid, difference, DIFFERENCE_LEVELS),
  };
}

type GridShape = Pick<FootprintGrid, 'west' | 'south' | 'stepDeg' | 'nx' | 'ny'>;

/** Area between each level and the next, as polygons with holes in longitude and latitude; empty bands are left out. */
export function bandsOf(grid: GridShape, values: ArrayLike<number>, levels: readonly number[]): Bands {
  const trace = tracer(grid, values);
  return bandsBetween(grid, levels.map(trace), levels);
}

/** Apart by so little that it shows nowhere, lines that would lie on each other stay nested [m/s]. */
const APART = 1e-6;

/** Area between each chance of a gust and the next: `fields` hold the gust reached with each of CHANCE_LEVELS. */
export function chanceBands(grid: GridShape, fields: readonly ArrayLike<number>[], gust: number): Bands {
  const above = fields.map((field, k) => tracer(grid, field)(gust + k * APART));
  return bandsBetween(grid, above, CHANCE_LEVELS);
}

/** Rings around what lies above a value, in the tracer’s own coordinates. */
function tracer(grid: GridShape, values: ArrayLike<number>): (level: number) => Ring[] {
  const width = grid.nx + 2;
  const height = grid.ny + 2;
  const padded = new Array<number>(width * height).fill(NOTHING);
  for (let j = 0; j < grid.ny; j++) {
    for (let i = 0; i < grid.nx; i++) {
      const value = values[j * grid.nx + i]!;
      padded[(j + 1) * width + i + 1] = Number.isNaN(value) ? NOTHING : value;
    }
  }
  const trace = contours().size([width, height]);
  return (level) => trace.contour(padded, level).coordinates.flat();
}

/** Each level's rings and the next one's, as polygons with holes. */
function bandsBetween(grid: GridShape, above: readonly Ring[][], levels: readonly number[]): Bands {
  // The tracer puts the value with index i at i + 0.5, and the padding shifts the grid by one.
  const place = ([x, y]: Position): Position => [
    rounded(grid.west + (x! - 1.5) * grid.stepDeg),
    rounded(grid.south + (y! - 1.5) * grid.stepDeg),
  ];
  const features: Feature<MultiPolygon, { level: number }>[] = [];
  levels.forEach((level, k) => {
    const coordinates = nested([...above[k]!, ...(above[k + 1] ?? [])])
      .map((polygon) => polygon.map((ring) => ring.map(place)))
      .map((polygon) => polygon.filter((ring) => signedArea(ring) !== 0))
      .filter((polygon) => sum(polygon.map(signedArea)) > SLIVER * grid.stepDeg ** 2);
    if (coordinates.length > 0) {
      features.push({ type: 'Feature', properties: { level }, geometry: { type: 'MultiPolygon', coordinates } });
    }
  });
  return { levels, bbox: extent(features, grid), bands: { type: 'FeatureCollection', features } };
}

type Ring = Position[];

/**
 * Sorts rings that do not cross into polygons by the even-odd rule: a ring inside an even number of others is an outer
 * ring, the others are holes of the innermost ring around them. Outer rings run anticlockwise, holes clockwise.
 */
function nested(rings: Ring[]): Ring[][] {
  const all = rings.map((ring) => ({ ring, area: signedArea(ring), box: boxOf(ring) }));
  const parents = all.map((inner) => {
    let parent = -1;
    let depth = 0;
    all.forEach((outer, k) => {
      if (outer === inner || Math.abs(outer.area) <= Math.abs(inner.area)) return;
      const [x, y] = inner.ring[0] as [number, number];
      if (x < outer.box[0] || x > outer.box[2] || y < outer.box[1] || y > outer.box[3]) return;
      if (!contains(outer.ring, x, y)) return;
      depth++;
      if (parent < 0 || Math.abs(outer.area) < Math.abs(all[parent]!.area)) parent = k;
    });
    return { parent, depth };
  });
  const polygons = new Map<number, Ring[]>();
  all.forEach(({ ring, area }, k) => {
    if (parents[k]!.depth % 2 === 0) polygons.set(k, [area > 0 ? ring : ring.toReversed()]);
  });
  all.forEach(({ ring, area }, k) => {
    const { parent, depth } = parents[k]!;
    if (depth % 2 === 1) polygons.get(parent)?.push(area < 0 ? ring : ring.toReversed());
  });
  return [...polygons.values()];
}

function contains(ring: Ring, x: number, y: number): boolean {
  let odd = false;
  for (let k = 0, last = ring.length - 1; k < ring.length; last = k++) {
    const [x0, y0] = ring[last] as [number, number];
    const [x1, y1] = ring[k] as [number, number];
    if (y0 > y !== y1 > y && x < x0 + ((y - y0) * (x1 - x0)) / (y1 - y0)) odd = !odd;
  }
  return odd;
}

function signedArea(ring: Ring): number {
  let twice = 0;
  for (let k = 0; k + 1 < ring.length; k++) {
    const [x0, y0] = ring[k] as [number, number];
    const [x1, y1] = ring[k + 1] as [number, number];
    twice += x0 * y1 - x1 * y0;
  }
  return twice / 2;
}

function sum(values: number[]): number {
  return values.reduce((total, value) => total + value, 0);
}

function boxOf(ring: Ring): [number, number, number, number] {
  const box: [number, number, number, number] = [Infinity, Infinity, -Infinity, -Infinity];
  for (const [x, y] of ring as [number, number][]) {
    box[0] = Math.min(box[0], x);
    box[1] = Math.min(box[1], y);
    box[2] = Math.max(box[2], x);
    box[3] = Math.max(box[3], y);
  }
  return box;
}

function extent(features: Feature<MultiPolygon>[], grid: GridShape): [number, number, number, number] {
  const points = features.flatMap(({ geometry }) => geometry.coordinates.flat(2));
  if (points.length > 0) return boxOf(points);
  const east = grid.west + (grid.nx - 1) * grid.stepDeg;
  const north = grid.south + (grid.ny - 1) * grid.stepDeg;
  return [grid.west, grid.south, east, north].map(rounded) as [number, number, number, number];
}

function rounded(degrees: number): number {
  return Math.round(degrees * 1e4) / 1e4;
}
