import type { Position } from 'geojson';
import { describe, expect, it } from 'vitest';
import {
  CHANCE_LEVELS,
  DIFFERENCE_LEVELS,
  GUST_LEVELS,
  bandsOf,
  chanceBands,
  footprintBands,
  type Bands,
} from '../../api/compute/bands.ts';

const shape = { west: -5, south: -5, stepDeg: 0.1, nx: 101, ny: 101 };
const field = (f: (x: number, y: number) => number, grid = shape) =>
  Float64Array.from({ length: grid.nx * grid.ny }, (_, k) =>
    f(grid.west + (k % grid.nx) * grid.stepDeg, grid.south + Math.floor(k / grid.nx) * grid.stepDeg),
  );

const ringArea = (ring: Position[]) => {
  let twice = 0;
  for (let k = 0; k + 1 < ring.length; k++) twice += ring[k]![0]! * ring[k + 1]![1]! - ring[k + 1]![0]! * ring[k]![1]!;
  return twice / 2;
};
const areaOf = ({ bands }: Bands, level: number) => {
  const feature = bands.features.find(({ properties }) => properties.level === level);
  return feature ? feature.geometry.coordinates.flat().reduce((sum, ring) => sum + ringArea(ring), 0) : 0;
};

describe('bands of a cone', () => {
  // 60 at the middle, falling by 10 a degree: the line of value v is a circle of radius (60 - v) / 10.
  const cone = bandsOf(
    shape,
    field((x, y) => 60 - 10 * Math.hypot(x, y)),
    GUST_LEVELS,
  );

  it('are rings between circles of known radius', () => {
    for (const level of [20, 25, 30, 35, 40, 45, 50]) {
      const exact = Math.PI * (((60 - level) / 10) ** 2 - ((55 - level) / 10) ** 2);
      expect(Math.abs(areaOf(cone, level) / exact - 1)).toBeLessThan(0.01);
    }
    // The innermost is a disc of half a degree, five nodes across.
    expect(Math.abs(areaOf(cone, 55) / (Math.PI * 0.25) - 1)).toBeLessThan(0.05);
  });

  it('leave out what is not reached', () => {
    expect(cone.bands.features.map(({ properties }) => properties.level)).toEqual([20, 25, 30, 35, 40, 45, 50, 55]);
    expect(cone.levels).toEqual(GUST_LEVELS);
    cone.bbox.forEach((edge, k) => expect(Math.abs(edge - [-4, -4, 4, 4][k]!)).toBeLessThan(0.01));
  });

  it('are closed polygons with holes, outer rings anticlockwise, on their own circles', () => {
    for (const { properties, geometry } of cone.bands.features) {
      expect(geometry.coordinates).toHaveLength(1);
      const [outer, ...holes] = geometry.coordinates[0]!;
      expect(ringArea(outer!)).toBeGreaterThan(0);
      expect(holes).toHaveLength(properties.level < 55 ? 1 : 0);
      for (const hole of holes) expect(ringArea(hole)).toBeLessThan(0);
      for (const ring of [outer!, ...holes]) expect(ring[0]).toEqual(ring[ring.length - 1]);
      for (const [x, y] of outer!) {
        expect(Math.abs(Math.hypot(x!, y!) - (60 - properties.level) / 10)).toBeLessThan(0.02);
        expect(Math.round(x! * 1e4) / 1e4).toBe(x);
      }
    }
  });

  it('move with the grid across the antimeridian without a break', () => {
    const moved = { ...shape, west: 175 };
    const far = bandsOf(
      moved,
      field((x, y) => 60 - 10 * Math.hypot(x - 180, y), moved),
      GUST_LEVELS,
    );
    expect(far.bbox[0]).toBeCloseTo(176, 2);
    expect(far.bbox[2]).toBeCloseTo(184, 2);
    for (const level of [20, 40, 55]) expect(areaOf(far, level)).toBeCloseTo(areaOf(cone, level), 2);
  });
});

describe('bands of other fields', () => {
  it('tile the grid: together they cover what lies above the lowest level, also where it is cut off', () => {
    const slope = bandsOf(
      shape,
      field((x) => 40 + 6 * x),
      GUST_LEVELS,
    );
    // Above 20 from x = -10/3 on; the grid ends at 5 and is 10 high. Contours cut the corners of the grid.
    const total = GUST_LEVELS.reduce((sum, level) => sum + areaOf(slope, level), 0);
    expect(Math.abs(total - (5 + 10 / 3) * 10)).toBeLessThan(0.1);
    // From 25 to 30 the slope needs 5/6 of a degree.
    expect(areaOf(slope, 25)).toBeCloseTo((5 / 6) * 10, 1);
  });

  it('keep an eye as a hole and an island inside it as a polygon of its own', () => {
    // A ring of wind around a calm eye with a knot in the middle.
    const ring = (x: number, y: number) => {
      const r = Math.hypot(x, y);
      return r < 0.8 ? 34 - 20 * r : 52 - 17 * Math.abs(r - 2.4);
    };
    const bands = bandsOf(shape, field(ring), [30]);
    const polygons = bands.bands.features[0]!.geometry.coordinates;
    expect(polygons.map((polygon) => polygon.length).toSorted()).toEqual([1, 2]);
    const width = 22 / 17;
    const exact = Math.PI * ((2.4 + width) ** 2 - (2.4 - width) ** 2 + 0.2 ** 2);
    expect(Math.abs(areaOf(bands, 30) / exact - 1)).toBeLessThan(0.01);
  });

  it('treat nodes without a value as calm', () => {
    const values = field((x, y) => 60 - 10 * Math.hypot(x, y)).map((v, k) => (k % shape.nx < 50 ? Number.NaN : v));
    const half = bandsOf(shape, values, GUST_LEVELS);
    expect(Math.abs(areaOf(half, 30) / (Math.PI * (9 - 6.25) * 0.5) - 1)).toBeLessThan(0.02);
  });

  it('are none for a calm field, with the bounds of the grid', () => {
    const calm = bandsOf(
      shape,
      field(() => 12),
      GUST_LEVELS,
    );
    expect(calm.bands.features).toEqual([]);
    expect(calm.bbox).toEqual([-5, -5, 5, 5]);
  });
});

describe('bands of a footprint', () => {
  it('compare median and plain only where one of them reaches the lowest band', () => {
    const plain = field((x, y) => 60 - 10 * Math.hypot(x, y));
    const grid = { ...shape, plain, p50: plain.map((v) => v + 1), p90: plain.map((v) => v + 3), isPartial: false };
    const { plain: a, p50, p90, difference } = footprintBands(grid);
    expect(areaOf(p50, 20)).toBeGreaterThan(areaOf(a, 20));
    expect(areaOf(p90, 20)).toBeGreaterThan(areaOf(p50, 20));
    expect(difference.levels).toEqual(DIFFERENCE_LEVELS);
    expect(difference.bands.features.map(({ properties }) => properties.level)).toEqual([0.5]);
    // Out to 20 m/s in the median: radius 4.1; the mask ends between nodes.
    expect(Math.abs(areaOf(difference, 0.5) / (Math.PI * 4.1 ** 2) - 1)).toBeLessThan(0.03);
  });
});

describe('bands of a chance', () => {
  const cone = (x: number, y: number) => 60 - 10 * Math.hypot(x, y);
  it('lie between circles where the gusts reached with each chance differ', () => {
    // Each chance reaches a gust lower by 1 than the one before: circles of radius 2, 1.9, 1.8 and so on.
    const bands = chanceBands(
      shape,
      CHANCE_LEVELS.map((_chance, k) => field((x, y) => cone(x, y) - k)),
      40,
    );
    CHANCE_LEVELS.forEach((level, k) => {
      const inner = k === CHANCE_LEVELS.length - 1 ? 0 : 2 - 0.1 * (k + 1);
      expect(areaOf(bands, level)).toBeCloseTo(Math.PI * ((2 - 0.1 * k) ** 2 - inner ** 2), 1);
    });
  });

  it('are one band where every draw is the same, and the others are empty', () => {
    const same = chanceBands(
      shape,
      CHANCE_LEVELS.map(() => field(cone)),
      40,
    );
    expect(same.bands.features.map(({ properties }) => properties.level)).toEqual([0.95]);
    expect(Math.abs(areaOf(same, 0.95) / (4 * Math.PI) - 1)).toBeLessThan(0.01);
  });
});
