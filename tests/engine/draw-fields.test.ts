import { describe, expect, it } from 'vitest';
import { chanceFields, chanceOf, drawField } from '#engine/footprint/draw-fields.ts';
import { fieldsOver, footprintNet, type Net } from '#engine/footprint/grid.ts';
import { buildLandIndex } from '#engine/geo/land.ts';
import { AMPLITUDE_WEIGHTS, DRAW_COUNT, PHASE_COUNT } from '#engine/ring/draws.ts';
import { hoursInlandOf } from '#engine/track/inland.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { prepareStorm } from '#engine/track/storm.ts';
import { sea } from '../helpers/any-storm.ts';
import { referenceScores } from '../helpers/reference-chain.ts';
import { mirroredFixes, workedFixes } from '../helpers/worked-storm.ts';

const ocean = buildLandIndex([]);
const storm = prepareStorm(workedFixes, DEFAULT_OPTIONS, ocean);
// Across the track and out of the layer on both sides, over the antimeridian.
const net: Net = { west: 178.6, south: 23.4, stepDeg: 0.35, nx: 7, ny: 4, isPartial: true };
const nodes = Array.from({ length: net.nx * net.ny }, (_, k) =>
  sea(net.south + Math.floor(k / net.nx) * net.stepDeg, net.west + (k % net.nx) * net.stepDeg),
);
const slow = nodes.map((site) =>
  referenceScores(storm.fixes, storm.wavenumber, site, hoursInlandOf(workedFixes, null)),
);
const field = (which: number | 'p99') => drawField(storm, ocean, net, which);
const weightOf = (draw: number) => AMPLITUDE_WEIGHTS[Math.floor(draw / PHASE_COUNT)]! / PHASE_COUNT;

describe('the field of one draw', () => {
  it.each([0, 23, 117, 180, 263])('gives every node what the slow chain gives a site there: draw %d', (draw) => {
    const gusts = field(draw);
    slow.forEach(({ draws }, k) => expect(gusts[k]!).toBeCloseTo(draws[draw]!, 8));
  });

  it('differs from plain inside the layer only', () => {
    const gusts = field(250);
    const { plain } = fieldsOver(storm, ocean, net, { plain: ({ plainGust }, node) => plainGust[node]! });
    const changed = [...gusts].filter((gust, k) => gust !== plain[k]).length;
    expect(changed).toBeGreaterThan(nodes.length / 3);
    expect(changed).toBeLessThan(nodes.length);
  });

  it('averages over all draws, by their weights, to the mean of the slow chain', () => {
    const sums = new Float64Array(nodes.length);
    for (let draw = 0; draw < DRAW_COUNT; draw++) {
      field(draw).forEach((gust, k) => (sums[k]! += weightOf(draw) * gust));
    }
    slow.forEach(({ mean, plain }, k) => {
      expect(sums[k]!).toBeCloseTo(mean, 8);
      expect(sums[k]!).toBeGreaterThanOrEqual(plain - 1e-9);
    });
  });

  it('adds no more than the published bound to plain', () => {
    // 1.1 (strongest node) x 0.5 (cap of the amplitude) x 1.25 (top of the shape) x F vax / 1.05. At sea F is gust over
    // open-sea wind: with the drag coefficient at most 0.0024, 1 + 2.516438 x sqrt(0.0024) / 0.4 = 1.3082.
    const vax = Math.max(...storm.fixes.map(({ axisymmetricMaxWindMs }) => axisymmetricMaxWindMs));
    const bound = (1.1 * 0.5 * 1.25 * 1.3082 * vax) / 1.05;
    let most = 0;
    for (let draw = 240; draw < DRAW_COUNT; draw++) {
      field(draw).forEach((gust, k) => (most = Math.max(most, gust - slow[k]!.plain)));
    }
    expect(most).toBeGreaterThan(1);
    expect(most).toBeLessThanOrEqual(bound);
  });

  it('is plain, bit for bit, with the layer off', () => {
    const off = prepareStorm(workedFixes, { ...DEFAULT_OPTIONS, mesovortices: false }, ocean);
    const { plain } = fieldsOver(off, ocean, net, { plain: ({ plainGust }, node) => plainGust[node]! });
    for (const view of [200, 'p99'] as const) {
      expect([...drawField(off, ocean, net, view)]).toEqual([...plain]);
    }
  });

  it('is the mirror image south of the equator', () => {
    const south = prepareStorm(mirroredFixes(workedFixes), DEFAULT_OPTIONS, ocean);
    const below: Net = { ...net, south: -(net.south + (net.ny - 1) * net.stepDeg) };
    const mirrored = drawField(south, ocean, below, 130);
    const gusts = field(130);
    for (let k = 0; k < gusts.length; k++) {
      const row = net.ny - 1 - Math.floor(k / net.nx);
      expect(Math.abs(mirrored[row * net.nx + (k % net.nx)]! - gusts[k]!)).toBeLessThan(1e-10);
    }
  });

  it('is refused where there is no such draw', () => {
    for (const draw of [-1, 264, 1.5, Number.NaN]) expect(() => field(draw)).toThrow('draw');
  });
});

describe('the fields of chances', () => {
  const chances = [0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 0.95];
  const fields = chanceFields(storm, ocean, net, chances);

  it('reach a gust exactly where so large a share of the draws of the slow chain does', () => {
    for (const gust of [40, 43.7, 47.5, 55]) {
      let between = 0;
      slow.forEach(({ draws }, k) => {
        const counted = draws.reduce((sum, value, draw) => sum + (value >= gust ? weightOf(draw) : 0), 0);
        chances.forEach((chance, c) => expect(fields[c]![k]! >= gust).toBe(counted >= chance - 1e-10));
        if (counted > 0 && counted < 1) between += 1;
      });
      expect(between).toBeGreaterThan(0);
    }
  });

  it('fall as the chance rises', () => {
    for (let c = 1; c < chances.length; c++) {
      fields[c]!.forEach((gust, k) => expect(gust).toBeLessThanOrEqual(fields[c - 1]![k]!));
    }
  });

  it('are refused for a chance that is none', () => {
    for (const chance of [0, 1, -0.1, Number.NaN]) {
      expect(() => chanceFields(storm, ocean, net, [chance])).toThrow('chance');
    }
  });

  it('count a draw that just reaches a gust', () => {
    const draws = new Float64Array(DRAW_COUNT).fill(30);
    draws[0] = 50;
    expect(chanceOf(draws, 50)).toBe(150 / 24_000);
    expect(chanceOf(draws, 30)).toBe(1);
    expect(chanceOf(draws, 50.1)).toBe(0);
  });
});

describe('percentiles on a net', () => {
  it('are in order, and those of the slow chain', () => {
    const { p50, p90 } = fieldsOver(storm, ocean, net, {
      p50: (scores, node) => scores.p50[node]!,
      p90: (scores, node) => scores.p90[node]!,
    });
    const p99 = field('p99');
    slow.forEach(({ quantile }, k) => {
      expect(p99[k]!).toBeGreaterThanOrEqual(p90[k]!);
      expect(p90[k]!).toBeGreaterThanOrEqual(p50[k]!);
      expect(p99[k]!).toBeCloseTo(quantile(0.99), 8);
    });
  });
});

it('reaches every net the footprint is drawn on, and can be stopped', () => {
  const whole = footprintNet(storm, ocean, { mostNodes: 900 })!;
  expect(whole.nx * whole.ny).toBeLessThanOrEqual(900);
  let asked = 0;
  const stopped = drawField(storm, ocean, whole, 'p99', { shouldStop: () => ++asked >= 2 });
  expect(asked).toBe(2);
  expect(stopped.filter(Number.isNaN).length).toBeGreaterThan(whole.nx * whole.ny * 0.5);
});
