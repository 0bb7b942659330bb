import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { median, rounded, type Bench, type Measured } from './bench.ts';
import { scoreStream } from './score-stream.ts';
import { yardstickStorm } from './yardstick.ts';

const SITES = 100_000;
const PAIRS = 5;
const WARM_UP = 20_000;
const SOURCE = fileURLToPath(new URL('../../../tests/bench/chain-brute-force.c', import.meta.url));
const CLOCK = fileURLToPath(new URL('../../../tests/bench/cpu-clock.h', import.meta.url));

/**
 * The engine on one core (plain gust, durations, 264 draws, percentiles, losses, event sums) beside a brute-force C
 * program that does gusts and draws only. Both sides are timed by the processor time they use, so that others on the
 * machine count little; pairs are interleaved and the median ratio counts.
 */
export const engineBench: Bench = {
  keys: ['engineVsBruteForceC', 'engineSecondsPer100k', 'bruteForceCSecondsPer100k'],
  measure(say) {
    const storm = yardstickStorm();
    scoreStream(storm, WARM_UP);
    const folder = mkdtempSync(join(tmpdir(), 'gustloom-bench-'));
    try {
      const program = compiled(folder);
      if (program === null) say('gcc isn’t there: the engine is timed alone');
      const engine: number[] = [];
      const yardstick: number[] = [];
      for (let pair = 0; pair < PAIRS; pair++) {
        engine.push(scoreStream(storm, SITES).cpuS);
        if (program !== null) yardstick.push(yardstickSeconds(program));
        const beside = program === null ? '' : `, C ${yardstick[pair]!.toFixed(2)} s`;
        say(`100,000 sites: engine ${engine[pair]!.toFixed(2)} s of processor time${beside}`);
      }
      const unit = 's of processor time per 100,000 sites, one core';
      const measured: Record<string, Measured> = { engineSecondsPer100k: { value: rounded(median(engine)), unit } };
      if (program !== null) {
        const ratios = engine.map((seconds, i) => seconds / yardstick[i]!);
        measured.engineVsBruteForceC = { value: rounded(median(ratios)), unit: 'ratio of processor times' };
        measured.bruteForceCSecondsPer100k = { value: rounded(median(yardstick)), unit };
      }
      return Promise.resolve(measured);
    } finally {
      rmSync(folder, { recursive: true, force: true });
    }
  },
};

function compiled(folder: string): string | null {
  const program = join(folder, 'brute-force');
  const flags = ['-O3', '-march=native', '-ffast-math', '-include', CLOCK];
  try {
    execFileSync('gcc', [...flags, SOURCE, '-o', program, '-lm'], { stdio: 'pipe' });
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
