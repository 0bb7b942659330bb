import { describe, expect, it } from 'vitest';
import { wrappedNormalAngles } from '#engine/numerics/wrapped-normal.ts';

/** Share of a wrapped normal below an angle: its density as a sum of images, integrated by Simpson's rule from -pi. */
const shareBelow = (angle: number, sigma: number): number => {
  const density = (x: number): number => {
    let sum = 0;
    for (let k = -8; k <= 8; k++) sum += Math.exp(-(((x + 2 * Math.PI * k) / sigma) ** 2) / 2);
    return sum / (sigma * Math.sqrt(2 * Math.PI));
  };
  const steps = 4000;
  const h = (angle + Math.PI) / steps;
  let sum = density(-Math.PI) + density(angle);
  for (let k = 1; k < steps; k++) sum += (k % 2 === 1 ? 4 : 2) * density(-Math.PI + k * h);
  return (sum * h) / 3;
};

describe('angles of a wrapped normal', () => {
  it.each([0.1, 0.5, 1, 1.8, 3])('stand at the middles of equal shares, sigma %s', (sigma) => {
    wrappedNormalAngles(sigma, 24).forEach((angle, j) =>
      expect(shareBelow(angle, sigma)).toBeCloseTo((j + 0.5) / 24, 9),
    );
  });
  it('are normal quantiles times sigma where wrapping does nothing', () => {
    // Tables of the normal distribution: 0.75 lies below 0.674490 and 0.975 below 1.959964.
    expect(wrappedNormalAngles(0.01, 2)[1]! / 0.01).toBeCloseTo(0.67449, 5);
    expect(wrappedNormalAngles(0.01, 20)[19]! / 0.01).toBeCloseTo(1.959964, 5);
  });
  it('are symmetric, ascending, and evenly spread in the limit', () => {
    const angles = wrappedNormalAngles(0.7, 25);
    angles.forEach((angle, j) => expect(angle).toBe(angles[24 - j] === 0 ? 0 : -angles[24 - j]!));
    for (let j = 1; j < 25; j++) expect(angles[j]!).toBeGreaterThan(angles[j - 1]!);
    wrappedNormalAngles(9, 24).forEach((angle, j) =>
      expect(angle).toBeCloseTo(-Math.PI + (2 * Math.PI * (j + 0.5)) / 24, 12),
    );
  });
  it('refuse what is no error', () => {
    for (const sigma of [0, -1, NaN, 11]) expect(() => wrappedNormalAngles(sigma, 24)).toThrow('sigma of a phase');
    expect(() => wrappedNormalAngles(1, 0)).toThrow('number of phases');
  });
});
