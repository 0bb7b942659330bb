import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { median, rounded, type Bench } from './bench.ts';
import { yardstickSites, yardstickStorm } from './yardstick.ts';

const SITES = 10_000;
const PAIRS = 7;
const PER = 100_000 / SITES;
const SOURCE = fileURLToPath(new URL('../../../tests/bench/chain-brute-force.c', import.meta.url));

/**
 * The engine on one core (plain gust, durations, 264 draws, percentiles, losses, event sums) beside a brute-force C
 * program that does gusts and draws only. Pairs are interleaved and the median ratio counts, so that a busy machine
 * slows both alike.
 */
export const engineBench: Bench = (say) => {
  const storm = yardstickStorm();
  const sites = yardstickSites(SITES);
  const engineSeconds = (): number => {
    const start = process.hrtime.bigint();
    scoreSites(storm, sites, REFERENCE_CURVE);
    return Number(process.hrtime.bigint() - start) / 1e9;
  };
  engineSeconds();
  const folder = mkdtempSync(join(tmpdir(), 'gustloom-bench-'));
  try {
    const program = compiled(folder);
    if (program === null) say('gcc isn’t there: the engine is timed alone');
    const engine: number[] = [];
    const yardstick: number[] = [];
    for (let pair = 0; pair < PAIRS; pair++) {
      engine.push(engineSeconds());
      if (program !== null) yardstick.push(yardstickSeconds(program));
      const beside = program === null ? '' : `, C ${(PER * yardstick[pair]!).toFixed(2)} s`;
      say(`100,000 sites: engine ${(PER * engine[pair]!).toFixed(2)} s${beside}`);
    }
    const seconds = { value: rounded(PER * median(engine)), unit: 's per 100,000 sites, one core' };
    if (program === null) return Promise.resolve({ engineSecondsPer100k: seconds });
    return Promise.resolve({
      engineVsBruteForceC: { value: rounded(median(engine.map((s, i) => s / yardstick[i]!))), unit: 'ratio' },
      engineSecondsPer100k: seconds,
      bruteForceCSecondsPer100k: { value: rounded(PER * median(yardstick)), unit: seconds.unit },
    });
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
};

function compiled(folder: string): string | null {
  const program = join(folder, 'brute-force');
  try {
    execFileSync('gcc', ['-O3', '-march=native', '-ffast-math', SOURCE, '-o', program, '-lm'], { stdio: 'pipe' });
    return program;
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null;
    throw error;
  }
}

/** The program prints its own time without set-up. */
function yardstickSeconds(program: string): number {
  const printed = execFileSync(program, [String(SITES)], { encoding: 'utf8' });
  return Number(/^N \d+\s+([\d.]+) s/m.exec(printed)![1]);
}
