import { median, rounded, type Bench } from './bench.ts';
import { scoreStream } from './score-stream.ts';
import { yardstickStorm } from './yardstick.ts';

const SITES = 20_000;
const PAIRS = 5;

/** The linear boundary layer of Kepert (2001) beside the default asymmetry, in interleaved pairs. */
export const kepertBench: Bench = {
  keys: ['kepertVsDefault'],
  measure(say) {
    const [plain, kepert] = [yardstickStorm(), yardstickStorm({ asymmetry: 'kepert' })];
    for (const storm of [plain, kepert]) scoreStream(storm, SITES);
    const ratios: number[] = [];
    for (let pair = 0; pair < PAIRS; pair++) {
      const [before, after] = [scoreStream(plain, SITES).cpuS, scoreStream(kepert, SITES).cpuS];
      ratios.push(after / before);
      say(`20,000 sites: default ${before.toFixed(2)} s, Kepert ${after.toFixed(2)} s of processor time`);
    }
    return Promise.resolve({ kepertVsDefault: { value: rounded(median(ratios)), unit: 'ratio of processor times' } });
  },
};
