import { describe, expect, it } from 'vitest';
import { boundsOf, longitudeNear, placeByTrack, type LonLat } from '../../web/ui/map/geography.ts';
import { unwrapRing } from '../../web/ui/map/land.ts';
import { byGust, countCells, sitesInView, sizeClass, type MapSites } from '../../web/ui/map/map-data.ts';
import { bandFeatures, contourFeatures, siteFeatures, tickFeatures } from '../../web/ui/map/map-features.ts';

const sitesAt = (points: LonLat[], gusts: (number | null)[] = []): MapSites => ({
  siteNo: points.map((_, index) => index + 1),
  ref: points.map((_, index) => `S-${index + 1}`),
  longitude: points.map(([longitude]) => longitude),
  latitude: points.map(([, latitude]) => latitude),
  tivMinor: points.map((_, index) => 100 * (index + 1)),
  state: points.map(() => 'ready'),
  plainMs: points.map((_, index) => gusts[index] ?? null),
  p5Ms: points.map(() => null),
  p95Ms: points.map(() => null),
});

describe('land on a flat map', () => {
  it('runs on past 180 instead of jumping across the world', () => {
    const ring = unwrapRing([
      [170, 0],
      [179, 1],
      [-179, 2],
      [-170, 3],
      [170, 0],
    ]);
    expect(ring.map(([longitude]) => longitude)).toEqual([170, 179, 181, 190, 170]);
  });
  it('closes a ring round the pole along it', () => {
    const ring = unwrapRing([
      [-180, -70],
      [-60, -72],
      [60, -71],
      [180, -70],
    ]);
    const round = unwrapRing([
      [-120, -70],
      [0, -72],
      [120, -71],
      [-120, -70],
    ]);
    expect(ring.slice(-3)).toEqual([
      [180, -90],
      [-180, -90],
      [-180, -70],
    ]);
    expect(round.at(3)).toEqual([240, -70]);
    expect(round.slice(-3)).toEqual([
      [240, -90],
      [-120, -90],
      [-120, -70],
    ]);
  });
});

describe('longitudes', () => {
  it('are written near the reference', () => {
    expect(longitudeNear(-179, 178)).toBe(181);
    expect(longitudeNear(179, -178)).toBe(-181);
    expect(longitudeNear(10, 12)).toBe(10);
  });
  it('keep the sites of a view across the date line', () => {
    const sites = sitesAt([
      [179.5, -17],
      [-179.5, -17],
      [-170, -17],
    ]);
    expect(sitesInView(sites, [178, -20, 182, -10])).toEqual([0, 1]);
    expect(sitesInView(sites, [-182, -20, -178, -10])).toEqual([0, 1]);
    expect(siteFeatures(sites, [0, 1], 300, 180).features.map(({ geometry }) => geometry.coordinates[0])).toEqual([
      179.5, 180.5,
    ]);
  });
});

describe('place by the track', () => {
  const northward: LonLat[] = [
    [-85, 28],
    [-85, 31],
  ];
  it('says distance and side as seen along the way', () => {
    const right = placeByTrack(northward, [-84.9, 29.5])!;
    expect(right.side).toBe('right');
    // 0.1° of longitude at 29.5° N: 6371 km × 0.1° × π/180 × cos 29.5°.
    expect(right.distanceKm).toBeCloseTo(6371 * ((0.1 * Math.PI) / 180) * Math.cos((29.5 * Math.PI) / 180), 1);
    expect(placeByTrack(northward, [-85.1, 29.5])!.side).toBe('left');
    expect(placeByTrack([...northward].reverse(), [-84.9, 29.5])!.side).toBe('left');
  });
  it('works across the date line and in the southern hemisphere', () => {
    const eastward: LonLat[] = [
      [178, -17],
      [182, -17],
    ];
    const place = placeByTrack(eastward, [-179.5, -17.5])!;
    expect(place.side).toBe('right');
    expect(place.distanceKm).toBeCloseTo(6371 * ((0.5 * Math.PI) / 180), 3);
  });
});

describe('sites in many', () => {
  it('are counted in cells without losing one, nor any value', () => {
    const points = Array.from({ length: 500 }, (_, index): LonLat => [(index % 25) / 10, Math.floor(index / 25) / 10]);
    const sites = sitesAt(points);
    const cells = countCells(
      sites,
      points.map((_, index) => index),
      ([x, y]) => ({ x: 100 * x, y: 100 * y }),
    );
    expect(cells.length).toBeGreaterThan(5);
    expect(cells.length).toBeLessThan(60);
    expect(cells.reduce((sum, cell) => sum + cell.sites, 0)).toBe(500);
    expect(cells.reduce((sum, cell) => sum + cell.tivMinor, 0)).toBe((100 * 500 * 501) / 2);
    const [west, , east] = boundsOf(cells.map((cell): LonLat => [cell.longitude, cell.latitude]))!;
    expect(west).toBeGreaterThanOrEqual(0);
    expect(east).toBeLessThanOrEqual(2.4);
  });
  it('are walked by gust, unscored ones last, and drawn by value', () => {
    const sites = sitesAt(
      [
        [0, 0],
        [1, 0],
        [2, 0],
      ],
      [30, null, 55],
    );
    expect(byGust(sites, [0, 1, 2])).toEqual([2, 0, 1]);
    expect([0, 25, 100].map((value) => sizeClass(value, 100))).toEqual([0, 2, 4]);
  });
});

describe('bands', () => {
  const square = (from: number, to: number): [number, number][] => [
    [from, from],
    [to, from],
    [to, to],
    [from, to],
    [from, from],
  ];
  const inner = square(2, 8);
  const bands = {
    view: 'plain' as const,
    levels: [20, 25, 30],
    features: [
      { properties: { level: 20 }, geometry: { type: 'MultiPolygon' as const, coordinates: [[square(0, 10), inner]] } },
      {
        properties: { level: 25 },
        // The neighbour runs the shared ring the other way round, from another point.
        geometry: { type: 'MultiPolygon' as const, coordinates: [[[...inner].reverse()]] },
      },
    ],
  };
  it('take exactly the legend’s colours', () => {
    const colours = bandFeatures(bands, (name) => `<${name}>`).features.map(({ properties }) => properties?.colour);
    expect(colours).toEqual(['<--gust-20>', '<--gust-25>']);
  });
  it('carry hairlines on full tens only, not on the edge to the next band', () => {
    const lines = contourFeatures(bands).features;
    expect(lines).toHaveLength(1);
    expect(lines[0]!.geometry.coordinates).toEqual([square(0, 10)]);
  });
});

it('ticks the track each 3 hours, labels each 6, and says the date at midnight', () => {
  const times = [18, 21, 22, 24].map((hour, index) => ({
    time: new Date(Date.UTC(2026, 8, 2, hour)).toISOString(),
    longitude: -85,
    latitude: 28 + index,
  }));
  const path: LonLat[] = [
    [-85, 28],
    [-85, 31],
  ];
  const ticks = tickFeatures({ path, times }).features.map(({ properties }) => properties);
  expect(ticks).toEqual([
    { long: true, bearing: 0, label: '18:00' },
    { long: false, bearing: 0 },
    { long: true, bearing: 0, label: '3 Sep 00:00' },
  ]);
});
