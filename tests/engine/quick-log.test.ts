import { describe, expect, it } from 'vitest';
import { quickLog } from '#engine/numerics/quick-log.ts';

describe('the quick logarithm', () => {
  it('differs from the library’s by less than 1e-13 over the distances of the earth', () => {
    let worst = 0;
    for (let x = 1; x < 2.1e7; x *= 1.000_037) worst = Math.max(worst, Math.abs(quickLog(x) - Math.log(x)));
    expect(worst).toBeLessThan(1e-13);
  });
  it('is good on both sides of each cell’s edge', () => {
    for (let cell = 0; cell < 64; cell++) {
      const edge = 1 + cell / 32;
      for (const x of [edge * (1 - 1e-15), edge, edge * (1 + 1e-15)]) {
        expect(Math.abs(quickLog(x) - Math.log(x))).toBeLessThan(1e-13);
      }
    }
  });
  it('holds in 2^-50..2^50, and says so elsewhere', () => {
    expect(quickLog(2 ** -49.5)).toBeCloseTo(-49.5 * Math.LN2, 12);
    expect(quickLog(2 ** 49.5)).toBeCloseTo(49.5 * Math.LN2, 12);
    for (const x of [0, -1, 1e-20, 1e20, NaN, Infinity]) expect(quickLog(x)).toBeNaN();
  });
});
