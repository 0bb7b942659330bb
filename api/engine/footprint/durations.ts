import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import type { Passage } from './passage.ts';

/**
 * Time during which the plain gust reaches a threshold.
 *
 * @param storm     The storm.
 * @param passage   Series of a site from followPassage.
 * @param count     Number of times in it.
 * @param threshold Gust [m s⁻¹].
 * @returns Duration [s]; 0 when the threshold is never reached.
 * @source Crossings by straight lines between the times looked at.
 */
export function secondsAtLeast({ states }: Storm, passage: Passage, count: number, threshold: number): number {
  const { state, gust } = passage;
  let seconds = 0;
  let from = gust[0]! - threshold;
  let fromS = states[state[0]! * STATE_SIZE + STATE.timeS]!;
  for (let i = 1; i < count; i++) {
    const to = gust[i]! - threshold;
    const toS = states[state[i]! * STATE_SIZE + STATE.timeS]!;
    if (from >= 0) seconds += to >= 0 ? toS - fromS : ((toS - fromS) * from) / (from - to);
    else if (to >= 0) seconds += ((toS - fromS) * to) / (to - from);
    from = to;
    fromS = toS;
  }
  return seconds;
}
