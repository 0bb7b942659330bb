import { scoreSites } from '#engine/footprint/site-peaks.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import type { Storm } from '#engine/track/storm.ts';
import { cpuSeconds } from './bench.ts';
import { yardstickChunks } from './yardstick.ts';

/** What scoring a stream of sites took: the making of the sites is not counted. */
export interface StreamTimes {
  /** Processor time [s]. */
  cpuS: number;
  /** Time on the wall [s]. */
  wallS: number;
  /** Sum of the event's gross loss over the draws, so that nothing can be left out unseen [currency]. */
  checksum: number;
}

/** Scores the yardstick's sites on this thread, chunk by chunk as a run does. */
export function scoreStream(storm: Storm, count: number): StreamTimes {
  const times: StreamTimes = { cpuS: 0, wallS: 0, checksum: 0 };
  for (const sites of yardstickChunks(count)) {
    const [cpu, wall] = [cpuSeconds(), performance.now()];
    const { eventGross } = scoreSites(storm, sites, REFERENCE_CURVE);
    times.cpuS += cpuSeconds() - cpu;
    times.wallS += (performance.now() - wall) / 1000;
    for (const gross of eventGross) times.checksum += gross;
  }
  return times;
}
