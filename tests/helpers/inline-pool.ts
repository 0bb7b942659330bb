import * as tasks from '../../api/compute/engine.worker.ts';
import { EngineRefusal, EngineStopped, type EnginePool } from '../../api/compute/pool.ts';
import type { Answer, Tasks } from '../../api/compute/protocol.ts';

/** The engine in the test's own thread: no start-up, and a place to step in. `before` may throw, wait or look. */
export const inlinePool = (before: (name: keyof Tasks) => unknown = () => undefined): EnginePool => ({
  threads: 1,
  run: async <Name extends keyof Tasks>(name: Name, task: object, signal?: AbortSignal) => {
    await before(name);
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
