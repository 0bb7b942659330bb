import type { Passage } from './passage.ts';

/**
 * Time during which the plain gust reaches a threshold.
 *
 * @param passage   Series of a site from followPassage.
 * @param count     Number of times in it.
 * @param threshold Gust [m s⁻¹].
 * @returns Duration [s]; 0 when the threshold is never reached.
 * @source Crossings by straight lines between the times looked at.
 */
export function secondsAtLeast(passage: Passage, count: number, threshold: number): number {
  const { state, gust, timeS } = passage;
  let seconds = 0;
  let from = gust[0]! - threshold;
  let fromS = timeS[state[0]!]!;
  for (let i = 1; i < count; i++) {
    const to = gust[i]! - threshold;
    const toS = timeS[state[i]!]!;
    if (from >= 0) seconds += to >= 0 ? toS - fromS : ((toS - fromS) * from) / (from - to);
    else if (to >= 0) seconds += ((toS - fromS) * to) / (to - from);
    from = to;
    fromS = toS;
  }
  return seconds;
}
