import { Piscina } from 'piscina';
import type { Answer, StopFlag, Tasks } from './protocol.ts';

const BOOT = new URL('./boot.mjs', import.meta.url).href;
const ENTRY = new URL('./engine.worker.ts', import.meta.url);

/** The engine won't compute this: the input is outside a formula's range, or a result would be impossible. */
export class EngineRefusal extends Error {
  override name = 'EngineRefusal';
}

/** The work was asked to stop and did. */
export class EngineStopped extends Error {
  override name = 'EngineStopped';
}

type TaskOf<Name extends keyof Tasks> = Omit<Tasks[Name]['task'], 'stop'>;

export interface EnginePool {
  readonly threads: number;
  /** Runs a task on a thread. With a signal it stops between sites; without one it runs to its end. */
  run<Name extends keyof Tasks>(name: Name, task: TaskOf<Name>, signal?: AbortSignal): Promise<Tasks[Name]['reply']>;
  close(): Promise<void>;
}

interface PoolSettings {
  threads: number;
  /** Threads that are kept from the start on; the others come when there is work, and go when there is none. */
  kept: number;
  entry?: URL;
}

const IDLE_MS = 600_000;

const stopFlag = (): StopFlag => new Int32Array(new SharedArrayBuffer(Int32Array.BYTES_PER_ELEMENT));

/** Typed arrays of a task's columns travel without being copied; whoever sends them can't use them afterwards. */
const columnsOf = (task: object): ArrayBuffer[] =>
  'sites' in task && typeof task.sites === 'object' && task.sites !== null
    ? Object.values(task.sites).flatMap((value: unknown) =>
        ArrayBuffer.isView(value) && value.buffer instanceof ArrayBuffer ? [value.buffer] : [],
      )
    : [];

/** The engine on threads of its own, so that the process goes on answering while it computes. */
export class ThreadPool implements EnginePool {
  readonly threads: number;
  private readonly pool: Piscina;

  constructor({ threads, kept, entry = ENTRY }: PoolSettings) {
    this.threads = threads;
    this.pool = new Piscina({
      filename: BOOT,
      name: 'run',
      workerData: { entry: entry.href },
      minThreads: kept,
      maxThreads: threads,
      idleTimeout: IDLE_MS,
      // A thread that dies takes its task with it, and another one takes its place.
      recordTiming: false,
    });
    // Said by the task that failed; without a listener a dying idle thread would end the process.
    this.pool.on('error', () => undefined);
    for (let thread = 0; thread < kept; thread += 1) this.pool.run({ name: 'warm' }).catch(() => undefined);
  }

  async run<Name extends keyof Tasks>(
    name: Name,
    task: TaskOf<Name>,
    signal?: AbortSignal,
  ): Promise<Tasks[Name]['reply']> {
    const stop = stopFlag();
    const raise = () => Atomics.store(stop, 0, 1);
    if (signal?.aborted) raise();
    signal?.addEventListener('abort', raise, { once: true });
    try {
      const answer = (await this.pool.run(
        { name, task: { ...task, stop } },
        { transferList: columnsOf(task) },
      )) as Answer<Tasks[Name]['reply']>;
      if ('refused' in answer) throw new EngineRefusal(answer.refused);
      if ('stopped' in answer) throw new EngineStopped('The work was asked to stop', { cause: signal?.reason });
      return answer.reply;
    } finally {
      signal?.removeEventListener('abort', raise);
    }
  }

  async close(): Promise<void> {
    await this.pool.destroy();
  }
}
