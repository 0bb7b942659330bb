import { DomainError } from '../errors.ts';

const MOST_TIMES = 400_000;

/** Times at which a storm is looked at. */
export type TimeGrid = {
  /** Outer and inner times, strictly increasing [s], shape (n,). */
  readonly timeS: Float64Array;
  /** Indices of the outer times, shape (outer times,). */
  readonly outer: Int32Array;
};

/**
 * Outer times from the first fix on, plus the last fix; inner times between them.
 *
 * @param firstS Time of the first fix [s].
 * @param lastS  Time of the last fix [s], later.
 * @param stepS  Outer step [s], > 0.
 * @param innerS Inner step [s], > 0; from the outer step on there are no inner times.
 * @returns The times.
 * @throws {DomainError} when there would be more than 400 000.
 * @source Convention of this chain.
 */
export function timeGrid(firstS: number, lastS: number, stepS: number, innerS: number): TimeGrid {
  const expected = (lastS - firstS) / Math.min(stepS, innerS);
  if (!(expected <= MOST_TIMES)) throw new DomainError('number of time steps', Math.ceil(expected), `≤ ${MOST_TIMES}`);
  const times: number[] = [];
  const outer: number[] = [];
  for (let k = 0; firstS + k * stepS < lastS; k++) {
    const from = firstS + k * stepS;
    const to = Math.min(firstS + (k + 1) * stepS, lastS);
    outer.push(times.length);
    times.push(from);
    for (let j = 1; from + j * innerS < to; j++) times.push(from + j * innerS);
  }
  outer.push(times.length);
  times.push(lastS);
  return { timeS: Float64Array.from(times), outer: Int32Array.from(outer) };
}
