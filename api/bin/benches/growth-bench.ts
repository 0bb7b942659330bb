import { median, rounded, type Bench } from './bench.ts';
import { startScoring } from './scoring-client.ts';

const SIZES = [10_000, 100_000, 1_000_000] as const;
// Small runs are repeated, since a moment's disturbance is a greater share of them.
const REPEATS: Record<number, number> = { 10_000: 7, 100_000: 3, 1_000_000: 1 };

/** Cost per site and most memory held as the number of sites grows, streamed in chunks as a run does. */
export const growthBench: Bench = {
  keys: [
    'cpuPerSite10k',
    'cpuPerSite100k',
    'cpuPerSite1m',
    'cpuPerSiteLargestOverSmallest',
    'peakMemory100k',
    'peakMemory1m',
  ],
  async measure(say) {
    const microseconds: number[] = [];
    const memory: number[] = [];
    for (const size of SIZES) {
      const perSite: number[] = [];
      const client = await startScoring();
      let peakMb = 0;
      for (let repeat = 0; repeat < REPEATS[size]!; repeat++) {
        const { cpuS, peakMemoryMb } = await client.score(size);
        perSite.push((1e6 * cpuS) / size);
        peakMb = peakMemoryMb;
      }
      await client.close();
      microseconds.push(median(perSite));
      memory.push(peakMb);
      say(
        `${size.toLocaleString('en')} sites: ${median(perSite).toFixed(1)} µs a site, ${peakMb.toFixed(0)} MB at most`,
      );
    }
    const unit = 'µs of processor time a site';
    return {
      cpuPerSite10k: { value: rounded(microseconds[0]!), unit },
      cpuPerSite100k: { value: rounded(microseconds[1]!), unit },
      cpuPerSite1m: { value: rounded(microseconds[2]!), unit },
      cpuPerSiteLargestOverSmallest: {
        value: rounded(Math.max(...microseconds) / Math.min(...microseconds)),
        unit: 'ratio over 10,000, 100,000 and 1,000,000 sites',
      },
      peakMemory100k: { value: rounded(memory[1]!), unit: 'MB resident at most, 100,000 sites' },
      peakMemory1m: { value: rounded(memory[2]!), unit: 'MB resident at most, 1,000,000 sites' },
    };
  },
};
