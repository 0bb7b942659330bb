import { describe, expect, it } from 'vitest';
import { complexArray, fourierPlan, inverseTransform, transform, type ComplexArray } from '#engine/numerics/fourier.ts';
import { seededRandom } from '#engine/numerics/seeded-random.ts';

const LENGTHS = [1, 2, 3, 4, 6, 8, 9, 12, 16, 18, 27, 36, 64, 96, 128, 192, 243];
const COLUMNS = [1, 3];

const noise = (size: number, seed: number): ComplexArray => {
  const { normal } = seededRandom(seed);
  const out = complexArray(size);
  for (let k = 0; k < size; k++) [out.re[k], out.im[k]] = [normal(), normal()];
  return out;
};
const copy = ({ re, im }: ComplexArray): ComplexArray => ({ re: re.slice(), im: im.slice() });
const ran = (how: typeof transform, length: number, columns: number, input: ComplexArray): ComplexArray =>
  how(fourierPlan(length, columns), copy(input), complexArray(length * columns));

/** The definition, summed term by term. */
const directSum = (length: number, columns: number, { re, im }: ComplexArray, sign: 1 | -1): ComplexArray => {
  const out = complexArray(length * columns);
  for (let k = 0; k < length; k++) {
    for (let c = 0; c < columns; c++) {
      for (let j = 0; j < length; j++) {
        // The angle within one turn, so that its rounding doesn't grow with j and k.
        const angle = (sign * 2 * Math.PI * ((j * k) % length)) / length;
        const [cos, sin] = [Math.cos(angle), Math.sin(angle)];
        const at = j * columns + c;
        out.re[k * columns + c]! += re[at]! * cos - im[at]! * sin;
        out.im[k * columns + c]! += re[at]! * sin + im[at]! * cos;
      }
    }
  }
  return out;
};
const furthest = (a: ComplexArray, b: ComplexArray): number =>
  a.re.reduce((most, value, k) => Math.max(most, Math.hypot(value - b.re[k]!, a.im[k]! - b.im[k]!)), 0);
const energy = ({ re, im }: ComplexArray): number => re.reduce((sum, value, k) => sum + value ** 2 + im[k]! ** 2, 0);

describe.each(LENGTHS)('a transform of length %i', (length) => {
  it.each(COLUMNS)('is the direct sum, for %i columns, both ways', (columns) => {
    const input = noise(length * columns, length + columns);
    // Rounding grows with the root of the length at worst in the direct sum.
    const tolerance = 1e-13 * length;
    expect(furthest(ran(transform, length, columns, input), directSum(length, columns, input, -1))).toBeLessThan(
      tolerance,
    );
    expect(furthest(ran(inverseTransform, length, columns, input), directSum(length, columns, input, 1))).toBeLessThan(
      tolerance,
    );
  });

  it('comes back by its inverse, but for the length', () => {
    const input = noise(length * 2, length);
    const back = ran(inverseTransform, length, 2, ran(transform, length, 2, input));
    for (let k = 0; k < back.re.length; k++) {
      back.re[k]! /= length;
      back.im[k]! /= length;
    }
    expect(furthest(back, input)).toBeLessThan(1e-13);
  });

  it('keeps the sum of squares, as Parseval says', () => {
    const input = noise(length, 7 * length);
    expect(energy(ran(transform, length, 1, input)) / length / energy(input)).toBeCloseTo(1, 13);
  });
});

describe('a plan', () => {
  it.each([5, 7, 10, 14, 100, 125, 0, -4, 2.5, NaN])('of length %d is refused by its number', (length) => {
    expect(() => fourierPlan(length, 1)).toThrow(/transform length.*product of twos and threes/s);
  });
});
