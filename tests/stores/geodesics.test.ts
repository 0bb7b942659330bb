import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Position } from 'geojson';
import { feature } from 'topojson-client';
import type { GeometryCollection, Topology } from 'topojson-specification';
import { describe, expect, it } from 'vitest';
import { EARTH_RADIUS } from '#engine/constants.ts';
import { greatCircleDistance, initialBearing, type Place } from '#engine/geo/geodesy.ts';
import { distanceToLandM, FETCH_LIMIT, isLand } from '#engine/geo/land.ts';
import { landIndex } from '../../api/compute/land.ts';
import { testDatabase } from '../helpers/database.ts';

const { superUser } = await testDatabase();
const rowsOf = async <Row>(sql: string, values: unknown[] = []): Promise<Row[]> =>
  (await superUser.raw<{ rows: Row[] }>(sql, values as string[])).rows;

/** The same numbers in every run, uniform in 0..1. */
const numbers = (seed: number) => () => {
  seed = (Math.imul(seed, 1664525) + 1013904223) >>> 0;
  return seed / 2 ** 32;
};
const next = numbers(20261201);
const between = (least: number, most: number) => least + (most - least) * next();

type Pair = { a: Place; b: Place };
type Measured = Pair & { sphereM: number; ellipsoidM: number; azimuth: number };

const measure = async (pairs: Pair[]): Promise<Measured[]> => {
  const given = pairs.map(({ a, b }) => [a.longitude, a.latitude, b.longitude, b.latitude]);
  const rows = await rowsOf<{ sphere: number; ellipsoid: number; azimuth: number }>(
    `select ST_Distance(a, b, false) as sphere, ST_Distance(a, b, true) as ellipsoid, degrees(ST_Azimuth(a, b)) as azimuth
     from jsonb_array_elements(?::jsonb) with ordinality as pair (xy, no),
       lateral (select ST_Point((xy->>0)::float8, (xy->>1)::float8, 4326)::geography as a,
         ST_Point((xy->>2)::float8, (xy->>3)::float8, 4326)::geography as b) ends
     order by no`,
    [JSON.stringify(given)],
  );
  return rows.map(({ sphere, ellipsoid, azimuth }, i) => ({
    ...pairs[i]!,
    ...{ sphereM: sphere, ellipsoidM: ellipsoid, azimuth },
  }));
};

const turned = (longitude: number) => ((((longitude + 180) % 360) + 360) % 360) - 180;
const anywhere = (): Place => ({
  latitude: (Math.asin(between(-1, 1)) * 180) / Math.PI,
  longitude: between(-180, 180),
});
const near = ({ latitude, longitude }: Place, reach: number): Place => ({
  latitude: Math.max(-90, Math.min(90, latitude + between(-reach, reach))),
  longitude: turned(longitude + between(-reach, reach)),
});
const pairsOf = (count: number, make: () => Pair): Pair[] => Array.from({ length: count }, make);

const pairs = [
  ...pairsOf(70, () => ({ a: anywhere(), b: anywhere() })),
  // A site and a storm: some kilometres to a thousand.
  ...pairsOf(50, () => {
    const a = { latitude: between(-45, 45), longitude: between(-180, 180) };
    return { a, b: near(a, between(0.01, 9)) };
  }),
  // Across the antimeridian, both ways.
  ...pairsOf(40, () => {
    const a = { latitude: between(-45, 45), longitude: between(175, 180) };
    const b = { latitude: a.latitude + between(-4, 4), longitude: between(-180, -175) };
    return next() < 0.5 ? { a, b } : { a: b, b: a };
  }),
  // Around the poles, over them as a rule.
  ...pairsOf(40, () => {
    const sign = next() < 0.5 ? -1 : 1;
    const place = () => ({ latitude: sign * between(86, 90), longitude: between(-180, 180) });
    return { a: place(), b: place() };
  }),
];
const measured = await measure(pairs);

describe('distance and bearing against PostGIS', () => {
  it('crosses 180 degrees and goes over poles as often as meant', () => {
    expect(pairs).toHaveLength(200);
    expect(pairs.filter(({ a, b }) => Math.abs(a.longitude - b.longitude) > 180).length).toBeGreaterThan(60);
    expect(pairs.filter(({ a }) => Math.abs(a.latitude) > 86).length).toBeGreaterThanOrEqual(40);
  });

  it('gives its distance on the sphere, once scaled from its radius to ours', async () => {
    const [degree] = await measure([{ a: { latitude: 0, longitude: 0 }, b: { latitude: 1, longitude: 0 } }]);
    // One degree of its sphere says its radius: the mean (2a + b)/3 of the ellipsoid, 6371.009 km.
    const radius = degree!.sphereM / (Math.PI / 180);
    expect(radius).toBeCloseTo(6_371_008.77, 2);
    for (const { a, b, sphereM } of measured) {
      // Rounding only. The haversine's arcsine loses digits towards the antipode, 0.1 m at worst.
      const tolerance = sphereM > 19e6 ? 0.2 : 1e-3;
      expect(Math.abs(greatCircleDistance(a, b) - (sphereM * EARTH_RADIUS) / radius)).toBeLessThan(tolerance);
    }
  });

  it('stays within what a sphere can do of its distance on the ellipsoid', () => {
    // Radii of curvature of WGS84 go from 6 335 439 m (meridian, equator) to 6 399 594 m (poles); ours is 6 371 000 m.
    const longest = 6_371_000 / 6_335_439 - 1;
    const shortest = 6_371_000 / 6_399_594 - 1;
    for (const { a, b, ellipsoidM } of measured) {
      const excess = greatCircleDistance(a, b) / ellipsoidM - 1;
      expect(excess).toBeLessThan(longest + 1e-6);
      expect(excess).toBeGreaterThan(shortest - 1e-6);
    }
  });

  it('differs from the ellipsoid by the percentages published with the method', async () => {
    const published = [
      { latitude: 15, northSouth: 0.49, eastWest: -0.13 },
      { latitude: 25, northSouth: 0.38, eastWest: null },
      { latitude: 35, northSouth: 0.23, eastWest: -0.22 },
    ];
    const step = 0.01;
    const ends = published.flatMap(({ latitude }) => [
      { a: { latitude: latitude - step, longitude: 20 }, b: { latitude: latitude + step, longitude: 20 } },
      { a: { latitude, longitude: 20 - step }, b: { latitude, longitude: 20 + step } },
    ]);
    const percent = (await measure(ends)).map(
      ({ a, b, ellipsoidM }) => 100 * (greatCircleDistance(a, b) / ellipsoidM - 1),
    );
    published.forEach(({ northSouth, eastWest }, i) => {
      expect(percent[2 * i]).toBeCloseTo(northSouth, 2);
      if (eastWest !== null) expect(percent[2 * i + 1]).toBeCloseTo(eastWest, 2);
    });
  });

  it('sets out in its direction, but for what the ellipsoid turns', () => {
    // Close by, tan(bearing) scales with the ratio of the radii of curvature across and along the meridian, at most
    // 1/(1 - e²) = 1.00674 at the equator; that turns a bearing by at most 0.5 × 0.00674 rad = 0.193 degrees. Farther
    // out the offset at the target, which is of the same share, is seen under distance / sin(distance).
    const most = 0.193;
    let compared = 0;
    for (const { a, b, azimuth, sphereM } of measured) {
      const arc = sphereM / 6_371_008.77;
      if (arc > 2.5 || arc < 1e-4) continue;
      const turn = Math.abs(((initialBearing(a, b) - azimuth + 540) % 360) - 180);
      expect(turn).toBeLessThan((most * arc) / Math.sin(arc) + 1e-6);
      compared += 1;
    }
    expect(compared).toBeGreaterThan(185);
  });
});

// Polygons are cut loose west of Africa, so that none of those used below is torn; Greenland is, and is not used.
const TEAR = -30;
const east = (longitude: number) => (longitude < TEAR ? longitude + 360 : longitude);
type Box = { west: number; east: number; south: number; north: number };
const MARGIN = 2;

const atlas = createRequire(import.meta.url).resolve('world-atlas/land-10m.json');
const topology = JSON.parse(readFileSync(atlas, 'utf8')) as Topology<{ land: GeometryCollection }>;
const polygons = feature(topology, topology.objects.land)
  .features.flatMap(({ geometry }) => (geometry.type === 'MultiPolygon' ? geometry.coordinates : []))
  .map((polygon) => polygon.map((ring) => ring.map(([x, y]): Position => [east(x!), y!])));

/** A corner of a polygon's surroundings. */
const corner = (ring: Position[], pick: (a: number, b: number) => number) =>
  [0, 1].map((axis) => ring.reduce((far, point) => pick(far, point[axis]!), ring[0]![axis]!)) as [number, number];
const polygonsNear = ({ west, south, east: right, north }: Box): Position[][][] =>
  polygons.filter(([outer]) => {
    const [x0, y0] = corner(outer!, Math.min);
    const [x1, y1] = corner(outer!, Math.max);
    return x0 < right + MARGIN && x1 > west - MARGIN && y0 < north + MARGIN && y1 > south - MARGIN;
  });

const index = landIndex();

describe.each<[string, Box, number]>([
  ['Florida and the Bahamas', { west: 276, east: 284, south: 24, north: 31 }, 90],
  ['the Caspian Sea, a hole in its continent', { west: 47, east: 55, south: 36.5, north: 47 }, 70],
  ['Fiji, across the antimeridian', { west: 176.5, east: 181.5, south: -19.5, north: -15.5 }, 60],
])('land near %s, against PostGIS on the same polygons', (_, box, count) => {
  const points = Array.from({ length: count }, () => ({
    longitude: between(box.west, box.east),
    latitude: between(box.south, box.north),
  }));

  it('is land where a polygon covers the point, and as far as the nearest edge', async () => {
    const envelope = [box.west - MARGIN, box.south - MARGIN, box.east + MARGIN, box.north + MARGIN];
    // Edges are straight in longitude and latitude. Geography takes them for great circles, so they are cut into
    // pieces of at most a hundredth of a degree first, which lie within 0.1 m of either.
    const rows = await rowsOf<{ covered: boolean; distance: number }>(
      `with given as materialized (
         select ST_SetSRID(ST_GeomFromGeoJSON(part), 4326) as shape, ST_MakeEnvelope(?, ?, ?, ?, 4326) as surroundings
         from jsonb_array_elements(?::jsonb) as parts (part)
       ), land as materialized (
         select shape, surroundings from given where ST_Intersects(shape, surroundings)
       ), coast as materialized (
         select ST_Segmentize(ST_Collect(ST_Intersection(ST_Boundary(shape), surroundings)), 0.01)::geography as line
         from land
       )
       select exists (select from land where ST_Covers(shape, ST_Point((xy->>0)::float8, (xy->>1)::float8, 4326))) as covered,
         ST_Distance(coast.line, ST_Point((xy->>0)::float8, (xy->>1)::float8, 4326)::geography, false) as distance
       from coast, jsonb_array_elements(?::jsonb) with ordinality as points (xy, no) order by no`,
      [
        ...envelope,
        JSON.stringify(polygonsNear(box).map((coordinates) => ({ type: 'Polygon', coordinates }))),
        JSON.stringify(points.map(({ longitude, latitude }) => [longitude, latitude])),
      ],
    );
    let within = 0;
    let worst = 0;
    points.forEach(({ latitude, longitude }, i) => {
      const { covered, distance } = rows[i]!;
      // Longitudes as people give them, and the even-odd rule against a real point-in-polygon.
      expect([latitude, longitude, isLand(index, latitude, turned(longitude))]).toEqual([latitude, longitude, covered]);
      const signed = distanceToLandM(index, latitude, turned(longitude));
      expect(signed < 0).toBe(covered);
      const expected = (distance * EARTH_RADIUS) / 6_371_008.77;
      if (expected > FETCH_LIMIT) {
        expect(Math.abs(signed)).toBe(Infinity);
        return;
      }
      within += 1;
      worst = Math.max(worst, Math.abs(Math.abs(signed) - expected));
    });
    expect(within).toBeGreaterThan(count / 2);
    // The index takes a quarter of a degree of an edge for a great circle. Between that and the edge's own course lies
    // at most (0.25 degrees of longitude)² sin(latitude) cos(latitude) R / 8: 7.6 m at 45 degrees.
    expect(worst).toBeLessThan(7.8);
    const land = rows.filter(({ covered }) => covered).length;
    expect(Math.min(land, count - land)).toBeGreaterThan(5);
  });
});
