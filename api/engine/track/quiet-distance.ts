import { EARTH_RADIUS } from '../constants.ts';
import { hollandGradientWind, type HollandVortex } from '../winds/holland-1980.ts';
import { surfaceFactor } from '../winds/surface-factor.ts';

/** Open-sea winds for which a quiet distance is known: 2, 3, ..., 21 m/s. */
export const FIRST_QUIET_WIND = 2;
export const QUIET_WIND_COUNT = 20;

const STEPS_PER_DOUBLING = 24;
const FARTHEST = Math.PI * EARTH_RADIUS;
const MARGIN = 1.03;

/**
 * Distances beyond which the open-sea wind stays below given speeds.
 *
 * Outside the radius of maximum wind vortex wind and surface factor only fall with the distance, and the motion adds at
 * most its own vector, so the first of a row of distances at which their sum is below a speed bounds it from there on.
 *
 * @param vortex Vortex of a state.
 * @param motion Speed of the wind the motion adds [m s⁻¹].
 * @param out    Receives the squared chord on the unit sphere [1], for 2, 3, ..., 21 m/s from `first` on; Infinity where
 *               the wind may reach the speed anywhere.
 * @param first  Where in `out` to start.
 * @source Monotony of the Holland profile; looked up at distances 3 % apart.
 */
export function writeQuietDistances(vortex: HollandVortex, motion: number, out: Float64Array, first: number): void {
  out.fill(Infinity, first, first + QUIET_WIND_COUNT);
  let level = QUIET_WIND_COUNT - 1;
  const ratio = 2 ** (1 / STEPS_PER_DOUBLING);
  for (let r = vortex.rMax; r < FARTHEST && level >= 0; r *= ratio) {
    const wind = surfaceFactor(r) * hollandGradientWind(r, vortex) + motion;
    while (level >= 0 && wind < FIRST_QUIET_WIND + level) {
      out[first + level] = 4 * Math.sin(r / (2 * EARTH_RADIUS)) ** 2;
      level--;
    }
  }
}

/**
 * Distances beyond which a wind field without known monotony stays below given speeds.
 *
 * @param bound    Wind not exceeded on the circle at a distance [m s⁻¹].
 * @param nearest  Distance from which on to look [m].
 * @param out      As in writeQuietDistances.
 * @param first    Where in `out` to start.
 * @source Greatest of the bounds at distances 3 % apart from each distance on, and 3 % more for what lies between them.
 */
export function writeQuietDistancesBelow(
  bound: (r: number) => number,
  nearest: number,
  out: Float64Array,
  first: number,
): void {
  out.fill(Infinity, first, first + QUIET_WIND_COUNT);
  const ratio = 2 ** (1 / STEPS_PER_DOUBLING);
  let greatest = 0;
  let level = 0;
  for (let r = FARTHEST; r >= nearest && level < QUIET_WIND_COUNT; r /= ratio) {
    greatest = Math.max(greatest, MARGIN * bound(r));
    while (level < QUIET_WIND_COUNT && greatest >= FIRST_QUIET_WIND + level) level++;
    const chord2 = 4 * Math.sin(r / (2 * EARTH_RADIUS)) ** 2;
    out.fill(chord2, first + level, first + QUIET_WIND_COUNT);
  }
}
