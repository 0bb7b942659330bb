import { MOTION_HALF_SPAN } from '../constants.ts';
import { greatCircleDistance, initialBearing } from '../geo/geodesy.ts';
import { positionAt, type TimedPlace } from './position.ts';

/** Translation of the centre. */
export type Motion = {
  /** Speed [m s⁻¹]. */
  readonly speed: number;
  /** Bearing TOWARDS which the centre moves [deg], clockwise from north. */
  readonly heading: number;
};

/**
 * Motion of the centre at a time, over the hour around it; one-sided at the ends of the track.
 *
 * @param fixes At least two places at strictly increasing times [s].
 * @param timeS Time [s], between the first and the last fix.
 * @returns Speed and heading. A standing storm has speed 0 and heading 0.
 * @source Central difference; a constant motion per leg would make the wind jump at every fix.
 */
export function motionAt(fixes: readonly TimedPlace[], timeS: number): Motion {
  const from = Math.max(timeS - MOTION_HALF_SPAN, fixes[0]!.timeS);
  const to = Math.min(timeS + MOTION_HALF_SPAN, fixes[fixes.length - 1]!.timeS);
  const a = positionAt(fixes, from);
  const b = positionAt(fixes, to);
  return { speed: greatCircleDistance(a, b) / (to - from), heading: initialBearing(a, b) };
}
