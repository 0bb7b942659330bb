import { DomainError } from '../errors.ts';

/** A source of numbers that depends on its seed alone: the same seed, the same numbers, on every machine. */
export type SeededRandom = {
  /** Next number in [0, 1). */
  readonly uniform: () => number;
  /** Next number of the standard normal distribution. */
  readonly normal: () => number;
};

/**
 * Starts a row of pseudo-random numbers.
 *
 * @param seed Whole number in 0..2^32 - 1.
 * @returns The source; numbers come in a fixed order.
 * @throws {DomainError} when the seed is no such number.
 * @source SplitMix of Steele, Lea & Flood (2014), OOPSLA, in its 32-bit form; normals by Box & Muller (1958).
 */
export function seededRandom(seed: number): SeededRandom {
  if (!(Number.isInteger(seed) && seed >= 0 && seed < 2 ** 32)) throw new DomainError('seed', seed, 'in 0..2^32 - 1');
  let state = seed;
  const uniform = (): number => {
    state = (state + 0x9e3779b9) | 0;
    let mixed = state ^ (state >>> 16);
    mixed = Math.imul(mixed, 0x21f0aaad);
    mixed ^= mixed >>> 15;
    mixed = Math.imul(mixed, 0x735a2d97);
    mixed ^= mixed >>> 15;
    return (mixed >>> 0) / 2 ** 32;
  };
  const normal = (): number => {
    const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
    return radius * Math.cos(2 * Math.PI * uniform());
  };
  return { uniform, normal };
}
