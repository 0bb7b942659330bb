import { linearAxis, type Axis } from './axis.ts';

/** An axis that always holds zero, for changes that go both ways. */
export const signedAxis = (changes: readonly number[], wanted = 4): Axis =>
  linearAxis(Math.min(0, ...changes), Math.max(0, ...changes), wanted);
