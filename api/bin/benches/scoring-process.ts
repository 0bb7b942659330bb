import { scoreStream, type StreamTimes } from './score-stream.ts';
import { yardstickStorm } from './yardstick.ts';

// A process of its own that scores as many sites as it is told, once for each message, until it is disconnected.

const WARM_UP = 20_000;

/** Answer to a number of sites. */
export interface ScoringAnswer extends StreamTimes {
  /** Most memory held so far [MB]. */
  peakMemoryMb: number;
}

const storm = yardstickStorm();
scoreStream(storm, WARM_UP);
process.on('message', (count: number) => {
  const answer: ScoringAnswer = {
    ...scoreStream(storm, count),
    peakMemoryMb: process.resourceUsage().maxRSS / 1024,
  };
  process.send!(answer);
});
process.send!('ready');
