// Threads don't inherit the loader that lets Node read TypeScript: it is registered here, before the entry is read.
import { move, transferableSymbol, valueSymbol, workerData } from 'piscina';
import { register } from 'tsx/esm/api';

register();
const tasks = await import(workerData.entry);

/** Carries out one task by its name; the arrays of its reply are handed over instead of copied. */
export const run = ({ name, task }) => {
  const answer = tasks[name](task);
  const columns = Object.values(answer?.reply ?? {}).filter(ArrayBuffer.isView);
  if (columns.length === 0) return answer;
  return move({ [transferableSymbol]: columns.map(({ buffer }) => buffer), [valueSymbol]: answer });
};
