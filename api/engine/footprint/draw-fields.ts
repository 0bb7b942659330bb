import { DomainError } from '../errors.ts';
import type { LandIndex } from '../geo/land.ts';
import { DRAW_COUNT, DRAW_WEIGHT_TOTAL, DRAW_WEIGHT_UNITS, drawQuantiles } from '../ring/draws.ts';
import type { Storm } from '../track/storm.ts';
import { fieldsOver, type KeptOfNode, type Net } from './grid.ts';
import type { ScoreControl } from './site-peaks.ts';

/**
 * Weighted share of the draws that reach a gust.
 *
 * @param draws Peak gust per draw [m s⁻¹], shape (264,).
 * @param gust  The gust [m s⁻¹].
 * @returns The share [1], 0..1.
 * @source Weights of ring/draws.ts, counted as whole numbers.
 */
export function chanceOf(draws: ArrayLike<number>, gust: number): number {
  let units = 0;
  for (let d = 0; d < DRAW_COUNT; d++) if (draws[d]! >= gust) units += DRAW_WEIGHT_UNITS[d]!;
  return units / DRAW_WEIGHT_TOTAL;
}

/**
 * Gust of one draw, or the 99th percentile, at every node of a net.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param net     The net, such as that of the storm's footprint.
 * @param which   24 times strength node + phase [1], 0..263; or the percentile.
 * @param control Asked for stopping and told of finished nodes, block by block; a stopped field is not complete.
 * @returns Gusts [m s⁻¹], shape (ny, nx), south row first. Without the layer, and wherever it never acts, the plain one, bit
 *          for bit. NaN where the storm comes nowhere near 20 m/s.
 * @throws {DomainError} when there is no such draw.
 * @source The draws of scoreSites.
 */
export function drawField(
  storm: Storm,
  land: LandIndex,
  net: Net,
  which: number | 'p99',
  control: Omit<ScoreControl, 'onSite'> = {},
): Float64Array {
  const keep: KeptOfNode = which === 'p99' ? ({ p99 }, node) => p99[node]! : (_scores, _node, draws) => draws[which]!;
  if (which !== 'p99' && !(Number.isInteger(which) && which >= 0 && which < DRAW_COUNT)) {
    throw new DomainError('draw', which, `a whole number in 0..${DRAW_COUNT - 1}`);
  }
  return fieldsOver(storm, land, net, { gusts: keep }, control).gusts;
}

// Weights are 24000ths: this parts a share that is just reached from the next one.
const LEAST_SHARE = 1e-9;

/**
 * Gusts reached with given chances at every node of a net: a node reaches a gust with at least that chance exactly where its
 * field is at least that gust, so the line along which the chance holds is a contour of a smooth field.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param net     The net.
 * @param chances Chances [1], each in (0, 1).
 * @param control Asked for stopping and told of finished nodes, block by block; stopped fields are not complete.
 * @returns For each chance the gust [m s⁻¹], shape (ny, nx), south row first; gusts below 20 m/s may be too low.
 * @throws {DomainError} when a chance is out of its range.
 * @source A share of at least c reaches g where the (1 - c) quantile of the draws does.
 */
export function chanceFields(
  storm: Storm,
  land: LandIndex,
  net: Net,
  chances: readonly number[],
  control: Omit<ScoreControl, 'onSite'> = {},
): Float64Array[] {
  for (const chance of chances) {
    if (!(chance > 0 && chance < 1)) throw new DomainError('chance', chance, 'between 0 and 1');
  }
  const levels = chances.map((chance) => 1 - chance + LEAST_SHARE);
  const out = new Float64Array(levels.length);
  const kept = chances.map((_chance, k): [string, KeptOfNode] => [
    String(k),
    (_scores, _node, draws) => {
      // All of a node's are found at once, when the first is asked for.
      if (k === 0) drawQuantiles(draws, levels, out);
      return out[k]!;
    },
  ]);
  const fields = fieldsOver(storm, land, net, Object.fromEntries(kept), control);
  return chances.map((_chance, k) => fields[String(k)]!);
}
