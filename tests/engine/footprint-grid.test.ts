import { describe, expect, it } from 'vitest';
import { footprintGrid, GRID_ROUGHNESS, type FootprintGrid } from '#engine/footprint/grid.ts';
import { scoreSites, type SiteBatch } from '#engine/footprint/site-peaks.ts';
import { buildLandIndex, fetchBySector, isLand } from '#engine/geo/land.ts';
import { unwrapRing } from '#engine/geo/ring-unwrapping.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { TrackFix } from '#engine/track/fixes.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';

const box = (west: number, south: number, east: number, north: number) =>
  unwrapRing([
    [west, south],
    [east, south],
    [east, north],
    [west, north],
    [west, south],
  ]);
// The worked coast: land north of 25 N, on both sides of the antimeridian.
const coast = buildLandIndex([box(172, 25, 190, 35)]);
const ocean = buildLandIndex([]);

const fix = (
  hours: number,
  latitude: number,
  longitude: number,
  hPa: number,
  vmax: number,
  rmKm: number,
): TrackFix => ({
  timeS: hours * 3600,
  latitude,
  longitude,
  centralPressurePa: hPa * 100,
  ambientPressurePa: 101_000,
  maxWindMs: vmax,
  windAveragingS: 60,
  radiusOfMaxWindM: rmKm * 1000,
  radius34KtM: null,
  radius50KtM: null,
  radius64KtM: null,
  ringWidthFraction: null,
  eyeVorticityRatio: null,
  hoursInland: null,
});
const worked = [
  fix(0, 22, 179.2, 955, 50, 40),
  fix(6, 23.1, 179.55, 950, 52, 38),
  fix(12, 24.3, 179.95, 948, 53, 36),
  fix(18, 25.6, -179.6, 960, 46, 40),
  fix(24, 27, -179, 978, 34, 48),
];
const storm = prepareStorm(worked, DEFAULT_OPTIONS, coast);
const strongest = ({ plain }: FootprintGrid) => Math.max(...plain.filter((gust) => gust > 0));
const nodes = (grid: FootprintGrid) =>
  Array.from({ length: grid.nx * grid.ny }, (_, k) => ({
    k,
    longitude: grid.west + (k % grid.nx) * grid.stepDeg,
    latitude: grid.south + Math.floor(k / grid.nx) * grid.stepDeg,
  }));
const batchOf = (places: { latitude: number; longitude: number }[], land = coast): SiteBatch => {
  const count = places.length;
  const fetchM = new Float64Array(8 * count);
  places.forEach((place, k) => fetchBySector(land, place.latitude, place.longitude, fetchM, 8 * k));
  return {
    count,
    latitude: Float64Array.from(places, ({ latitude }) => latitude),
    longitude: Float64Array.from(places, ({ longitude }) => longitude),
    roughnessM: Float64Array.from(places, ({ latitude, longitude }) =>
      isLand(land, latitude, longitude) ? GRID_ROUGHNESS : Number.NaN,
    ),
    fetchM,
    topographicFactor: new Float64Array(count).fill(1),
    value: new Float64Array(count).fill(Number.NaN),
    deductible: new Float64Array(count),
    limit: new Float64Array(count).fill(Infinity),
  };
};

describe('footprint grid', () => {
  const grid = footprintGrid(storm, coast, { mostNodes: 6000 })!;

  it('gives every node what a site there would get, without looking at times that do not matter', () => {
    const some = nodes(grid).filter(({ k }) => k % 11 === 0);
    const scores = scoreSites(storm, batchOf(some), REFERENCE_CURVE);
    some.forEach(({ k }, at) => {
      if (scores.plainGust[at]! < 20) {
        // Not looked at, or only at some of the times.
        expect(grid.plain[k]! >= 20).toBe(false);
        return;
      }
      expect(grid.plain[k]).toBe(scores.plainGust[at]);
      expect(grid.p50[k]).toBe(scores.p50[at]);
      expect(grid.p90[k]).toBe(scores.p90[at]);
    });
  });

  it('lies across the antimeridian in one piece, on whole multiples of its step', () => {
    expect(grid.isPartial).toBe(false);
    expect(grid.west).toBeGreaterThan(170);
    expect(grid.west + grid.nx * grid.stepDeg).toBeGreaterThan(182);
    expect(grid.nx * grid.ny).toBeLessThanOrEqual(6000);
    expect(Math.abs(grid.west / grid.stepDeg - Math.round(grid.west / grid.stepDeg))).toBeLessThan(1e-9);
    expect(strongest(grid)).toBeGreaterThan(55);
  });

  it('holds everything that reaches the floor', () => {
    const east = grid.west + (grid.nx - 1) * grid.stepDeg;
    const north = grid.south + (grid.ny - 1) * grid.stepDeg;
    const around = [];
    // Closely spaced just outside, loosely farther off.
    for (const [margin, step] of [
      [0.8, 0.08],
      [8, 0.8],
    ] as const) {
      for (let latitude = grid.south - margin; latitude <= north + margin; latitude += step) {
        for (let longitude = grid.west - margin; longitude <= east + margin; longitude += step) {
          const isInside = longitude >= grid.west && longitude <= east && latitude >= grid.south && latitude <= north;
          if (!isInside) around.push({ latitude, longitude });
        }
      }
    }
    expect(around.length).toBeGreaterThan(1000);
    const scores = scoreSites(storm, batchOf(around), REFERENCE_CURVE);
    // Sites out of reach have no gust at all.
    expect(scores.plainGust.filter((gust) => gust >= 20)).toHaveLength(0);
  });

  it('drops the gust at the coast, where open country begins', () => {
    const at = (latitude: number) => {
      const row = Math.round((latitude - grid.south) / grid.stepDeg);
      const column = Math.round((180.5 - grid.west) / grid.stepDeg);
      return grid.plain[row * grid.nx + column]!;
    };
    expect(at(25.5)).toBeLessThan(at(24.6));
    expect(at(25.5)).toBeGreaterThan(0.6 * at(24.6));
  });

  it('is finer for a smaller focus, drawn in whichever turn of longitude, and holds the focus', () => {
    const focus = { west: -180.6, south: 24.4, east: -179.4, north: 25.4 };
    const near = footprintGrid(storm, coast, { focus, mostNodes: 1500 })!;
    expect(near.stepDeg).toBeLessThan(grid.stepDeg);
    expect(near.west).toBeLessThanOrEqual(179.4);
    expect(near.west + (near.nx - 1) * near.stepDeg).toBeGreaterThanOrEqual(180.6);
    expect(near.west).toBeGreaterThan(177);
    expect(near.isPartial).toBe(true);
    const same = footprintGrid(storm, coast, { focus: { ...focus, west: 179.4, east: 180.6 }, mostNodes: 1500 })!;
    expect(same).toEqual(near);
    const scores = scoreSites(storm, batchOf(nodes(near).slice(700, 720)), REFERENCE_CURVE);
    expect(scores.plainGust[0]).toBeGreaterThan(20);
    expect([...near.plain.slice(700, 720)]).toEqual([...scores.plainGust]);
  });

  it('keeps to the landfall of a long track at sea, and to the strongest part where even that is too large', () => {
    // Eight days westward along 15 N far from land, then a turn north to the coast.
    const long = [
      ...Array.from({ length: 9 }, (_, day) => fix(24 * day, 10, 220 - 5 * day, 960, 48, 35)),
      fix(216, 18, 179, 945, 55, 30),
      fix(240, 26, 179, 960, 45, 35),
    ];
    const longStorm = prepareStorm(long, DEFAULT_OPTIONS, coast);
    const landfall = footprintGrid(longStorm, coast, { mostNodes: 3000 })!;
    expect(landfall.west + (landfall.nx - 1) * landfall.stepDeg).toBeLessThan(190);
    expect(landfall.stepDeg).toBeLessThanOrEqual(0.125);
    expect(strongest(landfall)).toBeGreaterThan(50);
    const atSea = footprintGrid(longStorm, ocean, { mostNodes: 1000 })!;
    expect(atSea.isPartial).toBe(true);
    // The deepest fix is the one at 18 N.
    expect(atSea.south).toBeLessThan(18);
    expect(atSea.south + (atSea.ny - 1) * atSea.stepDeg).toBeGreaterThan(18);
  });

  it('does not exist for a storm too weak to matter, and refuses a handful of nodes', () => {
    const weak = prepareStorm([fix(0, 22, 179, 1008, 9, 60), fix(12, 22, 179.5, 1008, 9, 60)], DEFAULT_OPTIONS, coast);
    expect(footprintGrid(weak, coast)).toBeNull();
    expect(() => footprintGrid(storm, coast, { mostNodes: 5 })).toThrow('nodes');
  });

  it('can be stopped', () => {
    let asked = 0;
    let done = 0;
    const control = { shouldStop: () => ++asked >= 3, onProgress: (nodes: number) => (done = nodes) };
    const stopped = footprintGrid(storm, coast, { mostNodes: 1500 }, control)!;
    expect(asked).toBe(3);
    expect(done).toBeLessThan(stopped.nx * stopped.ny);
    footprintGrid(storm, coast, { mostNodes: 1500 }, { onProgress: control.onProgress });
    expect(done).toBe(stopped.nx * stopped.ny);
  });
});
