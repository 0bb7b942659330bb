import * as tasks from '../../api/compute/engine.worker.ts';
import { EngineRefusal, EngineStopped, type EnginePool } from '../../api/compute/pool.ts';
import type { Answer, Tasks } from '../../api/compute/protocol.ts';

interface Inline {
  /** May throw, wait or look before each task. */
  before?: (name: keyof Tasks) => unknown;
  /** Drawing takes a second a track; most tests don't look at the map. */
  draws?: boolean;
}

/** The engine in the test's own thread: no start-up, and a place to step in. */
export const inlinePool = ({ before = () => undefined, draws = false }: Inline = {}): EnginePool => ({
  threads: 1,
  run: async <Name extends keyof Tasks>(name: Name, task: object, signal?: AbortSignal) => {
    await before(name);
    if (name === 'footprint' && !draws) return null as Tasks[Name]['reply'];
    const stop = new Int32Array(new SharedArrayBuffer(4));
    if (signal?.aborted) stop[0] = 1;
    const work = tasks[name] as unknown as (given: object) => Answer<Tasks[Name]['reply']>;
    const answer = work({ ...task, stop });
    if ('refused' in answer) throw new EngineRefusal(answer.refused);
    if ('stopped' in answer) throw new EngineStopped('stopped');
    return answer.reply;
  },
  close: async () => undefined,
});
