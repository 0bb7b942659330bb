import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { Storm } from '#engine/track/storm.ts';
import { ThreadPool } from '../../compute/pool.ts';
import { cpuSeconds, median, rounded, type Bench } from './bench.ts';
import { startScoring } from './scoring-client.ts';
import { yardstickChunks, yardstickStorm } from './yardstick.ts';

const THREADS = 2;
const SITES = 80_000;
const PAIRS = 5;
const WARM_UP = 40_000;

/** Two threads of the pool beside two processes that know nothing of each other and score half the sites each. */
export const threadsBench: Bench = {
  keys: ['twoThreadsVsTwoProcesses', 'twoThreadsVsTwoProcessesCpu'],
  async measure(say) {
    const storm = yardstickStorm();
    const pool = new ThreadPool({ threads: THREADS, kept: THREADS });
    const clients = await Promise.all(Array.from({ length: THREADS }, startScoring));
    await scoreInPool(pool, storm, WARM_UP);
    const throughput: number[] = [];
    const cost: number[] = [];
    for (let pair = 0; pair < PAIRS; pair++) {
      const cpu = cpuSeconds();
      const pooled = await timed(() => scoreInPool(pool, storm, SITES));
      const pooledCpu = cpuSeconds() - cpu;
      let apartCpu = 0;
      const apart = await timed(async () => {
        const answers = await Promise.all(clients.map((client) => client.score(SITES / THREADS)));
        for (const { cpuS } of answers) apartCpu += cpuS;
      });
      throughput.push(apart / pooled);
      cost.push(apartCpu / pooledCpu);
      say(
        `${SITES.toLocaleString('en')} sites: two threads ${pooled.toFixed(2)} s, two processes ${apart.toFixed(2)} s`,
      );
    }
    await Promise.all([pool.close(), ...clients.map((client) => client.close())]);
    return {
      twoThreadsVsTwoProcesses: { value: rounded(median(throughput)), unit: 'ratio of throughputs on the wall' },
      twoThreadsVsTwoProcessesCpu: { value: rounded(median(cost)), unit: 'ratio of throughputs by processor time' },
    };
  },
};

const timed = async (work: () => Promise<void>): Promise<number> => {
  const begun = performance.now();
  await work();
  return (performance.now() - begun) / 1000;
};

/** As a run does: a chunk for each thread, and one that waits. */
const scoreInPool = async (pool: ThreadPool, storm: Storm, count: number): Promise<void> => {
  const chunks = yardstickChunks(count);
  const lane = async (): Promise<void> => {
    for (let next = chunks.next(); !next.done; next = chunks.next()) {
      await pool.run('score', { storm, sites: next.value, curve: REFERENCE_CURVE, countAboveMs: [] });
    }
  };
  await Promise.all(Array.from({ length: THREADS + 1 }, lane));
};
