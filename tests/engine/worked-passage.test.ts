import { describe, expect, it } from 'vitest';
import { drawPeaks, makeDrawWork } from '#engine/footprint/draws-of-site.ts';
import { amplitudeLaw, dominantMode, intensitySwitch } from '#engine/ring/amplitude.ts';
import { DRAW_COUNT, drawMean, drawQuantiles, radialShape } from '#engine/ring/draws.ts';
import { amplitudeNodes, type AmplitudeRegime } from '#engine/ring/regimes.ts';
import { ringShape, smoothRingModes } from '#engine/ring/stability.ts';

/*
 * The worked passage of the method reference, computed from the published formula there: 60 m/s, 30 km, open sea, the centre
 * 5 m/s westward past a place 28 km to the side, every 60 s for two hours each way; gust factor 1.
 */
const VMAX = 60;
const RMW = 30_000;

interface Case {
  width?: number;
  gamma?: number;
  offsetKm?: number;
  regime?: AmplitudeRegime;
}

const passed = ({ width = 0.35, gamma = 0.2, offsetKm = 28, regime = 'mixed' }: Case) => {
  const shape = ringShape(width, gamma);
  const modes = smoothRingModes(shape.delta, shape.gamma);
  const mode = dominantMode(modes);
  const omega = mode ? mode.pattern! * ((2 * VMAX) / RMW) : 0;
  const a1 = amplitudeLaw(modes) * intensitySwitch(VMAX, RMW);
  const times = Array.from({ length: 241 }, (_, i) => 60 * i - 7200);
  const count = times.length;
  const column = () => new Float64Array(count);
  const passage = {
    gust: column(),
    crest: column(),
    phaseCos: column(),
    phaseSin: column(),
    ownPhases: null,
    strengths: Float64Array.from(amplitudeNodes(regime)),
  };
  times.forEach((t, i) => {
    const x = -5 * t;
    const y = 1000 * offsetKm;
    const r = Math.hypot(x, y);
    passage.gust[i] = r <= RMW ? (VMAX * r) / RMW : VMAX * Math.sqrt(RMW / r);
    passage.crest[i] = a1 * VMAX * radialShape(r / RMW);
    const phase = (mode?.m ?? 0) * (Math.atan2(y, x) - omega * (t + 7200));
    passage.phaseCos[i] = Math.cos(phase);
    passage.phaseSin[i] = Math.sin(phase);
  });
  const peak = passage.gust.indexOf(Math.max(...passage.gust));
  const draws = new Float64Array(DRAW_COUNT);
  drawPeaks(passage, count, peak, makeDrawWork(count), draws);
  const [p50, p90, p99] = drawQuantiles(draws, [0.5, 0.9, 0.99]);
  return { base: passage.gust[peak]!, mean: drawMean(draws), p50: p50!, p90: p90!, p99: p99!, draws };
};

describe('the worked passage', () => {
  it('has base, mean, p50, p90 and p99 as printed', () => {
    const { base, mean, p50, p90, p99 } = passed({});
    expect([base, mean, p50, p90, p99].map((v) => v.toFixed(3))).toEqual([
      '59.989',
      '62.085',
      '61.772',
      '64.390',
      '66.973',
    ]);
  });

  it.each([
    [0, '60.000/61.529/64.048/66.875'],
    [10, '59.841/61.351/63.783/66.544'],
    [20, '59.896/61.346/63.833/66.828'],
    [30, '60.000/62.385/64.816/67.043'],
    [36, '54.772/56.463/58.145/59.702'],
    [50, '46.476/46.912/47.367/47.779'],
  ])('at %d km has base/p50/p90/p99 as printed', (offsetKm, printed) => {
    const { base, p50, p90, p99 } = passed({ offsetKm });
    expect([base, p50, p90, p99].map((v) => v.toFixed(3)).join('/')).toBe(printed);
  });

  // Sensitivities printed beside the defaults of ring width and eye ratio.
  it.each([
    [{}, '61.8/67.0'],
    [{ width: 0.25 }, '63.4/70.9'],
    [{ width: 0.45 }, '60.5/62.7'],
    [{ gamma: 0 }, '63.2/71.7'],
    [{ gamma: 0.4 }, '60.8/63.2'],
  ])('with %j has p50/p99 as printed', (ring, printed) => {
    const { p50, p99 } = passed(ring);
    expect(`${p50.toFixed(1)}/${p99.toFixed(1)}`).toBe(printed);
  });

  it('has weaker and stronger percentiles in the two regimes, and the same strongest draw where rings break down', () => {
    const [mixed, steady, breakdown] = [
      passed({}),
      passed({ regime: 'quasi-steady' }),
      passed({ regime: 'breakdown' }),
    ];
    expect(steady.p50).toBeLessThan(mixed.p50);
    expect(steady.p99).toBeLessThan(mixed.p99);
    expect(breakdown.p50).toBeGreaterThan(mixed.p50);
    expect(breakdown.p99).toBeGreaterThan(mixed.p99);
    // Strength 1.1 is the last node of the mixture and of the breakdown.
    expect(Math.max(...breakdown.draws)).toBeCloseTo(Math.max(...mixed.draws), 12);
  });
});
