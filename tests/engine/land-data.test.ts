import { expect, it } from 'vitest';
import { distanceToLandM, fetchBySector, isLand } from '#engine/geo/land.ts';
import { landIndex } from '../../api/compute/land.ts';

const index = landIndex();

it('knows well-known places as land or sea, on both sides of the antimeridian and at the poles', () => {
  const places: [string, number, number, boolean][] = [
    ['Paris', 48.857, 2.352, true],
    ['Orlando', 28.54, -81.38, true],
    ['Alice Springs', -23.7, 133.88, true],
    ['Taveuni, Fiji', -16.85, -179.97, true],
    ['Vanua Levu, Fiji', -16.6, 179.2, true],
    ['Wrangel Island west', 71.2, 179.9, true],
    ['Wrangel Island east', 71.2, -179.5, true],
    ['South Pole', -90, 0, true],
    ['East Antarctica', -80, 100, true],
    ['North Pole', 90, 0, false],
    ['Gulf of Mexico', 26, -90, false],
    ['Pacific at the date line', 0, 180, false],
    ['Bay of Bengal', 15, 88, false],
  ];
  for (const [name, latitude, longitude, land] of places) {
    expect([name, isLand(index, latitude, longitude)]).toEqual([name, land]);
  }
});

it('covers the known share of the earth', () => {
  // Land is 29.2 % of the surface, of which about 1.6 million km² (0.3 %) are ice shelves, drawn here as sea.
  let land = 0;
  const count = 60_000;
  for (let k = 0; k < count; k++) {
    // Fibonacci lattice: equal areas.
    const latitude = (Math.asin(1 - (2 * k + 1) / count) * 180) / Math.PI;
    if (isLand(index, latitude, (k * 137.50776405) % 360)) land++;
  }
  expect(land / count).toBeGreaterThan(0.283);
  expect(land / count).toBeLessThan(0.293);
});

it('finds the coast where an atlas has it', () => {
  // Miami Beach to the Gulf side of the Everglades is some 120 km; the Atlantic is at the door.
  const miami = fetchBySector(index, 25.8, -80.3, new Float64Array(8));
  expect(miami[2]).toBeGreaterThan(5_000);
  expect(miami[2]).toBeLessThan(15_000);
  expect(miami[6]).toBe(100_000);
  // Scilly lies about 45 km off Land's End.
  expect(distanceToLandM(index, 49.6, -8)).toBeGreaterThan(60_000);
  expect(distanceToLandM(index, 26, -90)).toBe(Infinity);
});

it('serves thousands of coastal sites a second', () => {
  const out = new Float64Array(8);
  // The best of several goes: other work on the machine is not the index's fault.
  const rates = Array.from({ length: 8 }, (_, go) => {
    const start = performance.now();
    for (let k = 500 * go; k < 500 * (go + 1); k++) {
      fetchBySector(index, 25 + ((k * 0.618) % 10), -98 + ((k * 0.377) % 20), out);
    }
    return 500 / ((performance.now() - start) / 1000);
  });
  expect(Math.max(...rates)).toBeGreaterThan(3_000);
});

it('knows the Caspian Sea, a hole in a continent that runs across 180 degrees, as water in any turn', () => {
  // Off Mangyshlak, Baku's roads and the deep south; Baku, Aktau and the Ustyurt plateau ashore.
  const water: [number, number][] = [
    [41.5, 50.5],
    [40.2, 50.6],
    [38, 51],
  ];
  const shore: [number, number][] = [
    [40.4, 49.8],
    [43.65, 51.2],
    [43, 55],
  ];
  for (const turn of [-360, 0, 360]) {
    for (const [latitude, longitude] of water) expect(isLand(index, latitude, longitude + turn)).toBe(false);
    for (const [latitude, longitude] of shore) expect(isLand(index, latitude, longitude + turn)).toBe(true);
  }
  // Either shore is farther than is looked for.
  expect(distanceToLandM(index, 41.5, 50.5)).toBe(Infinity);
});

it('lays no ring out over more than one turn, and none with a step of more than half of one', () => {
  const { segments, artificial } = index;
  const spans: number[] = [];
  let step = 0;
  let [west, east] = [Infinity, -Infinity];
  for (let s = 0; s < segments.length; s += 4) {
    const [x0, x1] = [segments[s]!, segments[s + 2]!];
    // The edges that close Antarctica along the pole are no coast.
    if (artificial[s / 4] === 0) step = Math.max(step, Math.abs(x1 - x0));
    [west, east] = [Math.min(west, x0, x1), Math.max(east, x0, x1)];
    // A ring's edges follow one another; the next ring starts elsewhere.
    if (segments[s + 4] === x1 && segments[s + 5] === segments[s + 3]) continue;
    spans.push(east - west);
    [west, east] = [Infinity, -Infinity];
  }
  expect(step).toBeLessThanOrEqual(180);
  expect(spans.length).toBeGreaterThan(4000);
  // Antarctica goes round once; the old world and America come next.
  const [first, second, third] = spans.sort((a, b) => b - a);
  expect(first).toBeCloseTo(360, 9);
  expect(second).toBeLessThan(210);
  expect(third).toBeLessThan(140);
});
