// Threads don't inherit the loader that lets Node read TypeScript: it is registered here, before the entry is read.
import { workerData } from 'piscina';
import { register } from 'tsx/esm/api';

register();
const tasks = await import(workerData.entry);

/** Carries out one task by its name. */
export const run = ({ name, task }) => tasks[name](task);
