import { afterAll, describe, expect, it, vi } from 'vitest';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { DEFAULT_OPTIONS } from '#engine/track/options.ts';
import { ThreadPool, type EnginePool } from '../../api/compute/pool.ts';
import { CHUNK_SITES } from '../../api/compute/protocol.ts';
import type { RunSite } from '../../api/features/runs/run-ports.ts';
import { batchOf, ScoredSites } from '../../api/features/runs/scored-sites.ts';
import { inlinePool } from '../helpers/inline-pool.ts';
import { workedFixes } from '../helpers/worked-storm.ts';

// A thread takes two seconds of a processor to start, and a busy machine has few to give.
vi.setConfig({ testTimeout: 180_000 });
const pool = new ThreadPool({
  threads: 2,
  kept: 0,
  entry: new URL('../helpers/crashing.worker.ts', import.meta.url),
});
afterAll(() => pool.close());

/** Sites around the worked storm, on both sides of 180 degrees. */
const sites = (count: number, from = 1): RunSite[] =>
  Array.from({ length: count }, (_, i) => {
    const no = from + i;
    const longitude = 178.4 + ((no * 0.7548776662) % 1) * 2.6;
    return {
      ...{ siteNo: no, ref: `S-${no}`, latitude: 22 + ((no * 0.569840291) % 1) * 5 },
      longitude: longitude > 180 ? longitude - 360 : longitude,
      roughnessM: no % 3 === 0 ? null : 0.03 + ((no * 0.3) % 0.4),
      ...{ tivMinor: 100_000_00 + no, deductibleMinor: 2_000_00, limitMinor: no % 5 === 0 ? 80_000_00 : null },
    };
  });

const stormFrom = (engine: EnginePool) =>
  engine.run('storm', { fixes: workedFixes, observations: [], options: DEFAULT_OPTIONS });

/** Scores an edition in chunks that are started together, and so finish in whatever order. */
const scored = async (engine: EnginePool, count: number, chunk: number): Promise<ScoredSites> => {
  const storm = await stormFrom(engine);
  const gathered = new ScoredSites(1);
  await Promise.all(
    Array.from({ length: Math.ceil(count / chunk) }, async (_, index) => {
      const part = sites(Math.min(chunk, count - index * chunk), 1 + index * chunk);
      const scores = await engine.run('score', {
        storm,
        sites: batchOf(part),
        curve: REFERENCE_CURVE,
        countAboveMs: [50],
      });
      gathered.add(index, part, scores);
    }),
  );
  return gathered;
};

describe('the engine on threads', () => {
  it('gives the same bits on one thread, on two, and in no thread of its own', async () => {
    const count = 2_500;
    const two = await scored(pool, count, 500);
    const one = new ThreadPool({ threads: 1, kept: 0 });
    const single = await scored(one, count, 500);
    await one.close();
    const inline = await scored(inlinePool(), count, 500);
    expect(two.digest()).toBe(single.digest());
    expect(two.digest()).toBe(inline.digest());
  });

  it('gives event sums that don’t depend on how the edition is cut', async () => {
    const [fine, coarse] = [await scored(pool, 1_000, 70), await scored(pool, 1_000, CHUNK_SITES)];
    expect([...fine.gross]).toEqual([...coarse.gross]);
    expect([...fine.groundUp]).toEqual([...coarse.groundUp]);
    expect([...fine].map((site) => ({ ...site }))).toEqual([...coarse].map((site) => ({ ...site })));
  });

  it('stops between sites when asked, and at once when asked before', async () => {
    const storm = await stormFrom(pool);
    const stop = new AbortController();
    const many = batchOf(sites(60_000));
    const working = pool.run('score', { storm, sites: many, curve: REFERENCE_CURVE, countAboveMs: [50] }, stop.signal);
    const begun = performance.now();
    setTimeout(() => stop.abort(), 50);
    await expect(working).rejects.toMatchObject({ name: 'EngineStopped' });
    expect(performance.now() - begun).toBeLessThan(3_000);
    const late = pool.run(
      'score',
      { storm, sites: batchOf(sites(10)), curve: REFERENCE_CURVE, countAboveMs: [50] },
      stop.signal,
    );
    await expect(late).rejects.toMatchObject({ name: 'EngineStopped' });
  });

  it('says in words what the engine refuses', async () => {
    const task = { fixes: workedFixes.slice(0, 1), observations: [], options: DEFAULT_OPTIONS };
    await expect(pool.run('storm', task)).rejects.toMatchObject({
      name: 'EngineRefusal',
      message: 'number of fixes is 1; it must be at least 2',
    });
  });

  it('loses a task with its thread, and goes on with another', async () => {
    const storm = await stormFrom(pool);
    const task = () => ({ storm, sites: batchOf(sites(10)), curve: REFERENCE_CURVE, countAboveMs: [50] });
    const crash = { ...task(), curve: { ...REFERENCE_CURVE, code: 'crash' } };
    await expect(pool.run('score', crash)).rejects.toThrow();
    await expect(pool.run('score', { ...crash, sites: batchOf(sites(10)) })).rejects.toThrow();
    const scores = await Promise.all([1, 2, 3].map(() => pool.run('score', task())));
    expect(scores.every(({ plainGust }) => plainGust.every((gust) => gust > 0))).toBe(true);
  });
});
