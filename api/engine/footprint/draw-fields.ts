import { GUST_FLOOR } from '../constants.ts';
import { DomainError } from '../errors.ts';
import type { LandIndex } from '../geo/land.ts';
import { DRAW_COUNT, DRAW_WEIGHT_TOTAL, DRAW_WEIGHT_UNITS } from '../ring/draws.ts';
import type { Storm } from '../track/storm.ts';
import { fieldsOver, type KeptOfNode, type Net } from './grid.ts';
import type { ScoreControl } from './site-peaks.ts';

/** One number a node made of its 264 draws: the gust in one of them, a high percentile, or the chance of a gust. */
export type DrawView =
  | { readonly kind: 'draw'; /** 24 times strength node + phase [1], 0..263. */ readonly draw: number }
  | { readonly kind: 'p99' }
  | { readonly kind: 'chance'; /** [m s⁻¹] */ readonly gust: number };

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
 * A view of the draws at every node of a net.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param net     The net, such as that of the storm's footprint.
 * @param view    Which number is wanted.
 * @param control Asked for stopping and told of finished nodes, block by block; a stopped field is not complete.
 * @returns Gust of one draw or 99th percentile [m s⁻¹], or chance [1], shape (ny, nx), south row first. Without the layer,
 *          and wherever it never acts, a gust is the plain one, bit for bit. NaN where the storm comes nowhere near 20 m/s.
 * @throws {DomainError} when there is no such draw, or the gust is below the floor of the net or no number.
 * @source The draws of scoreSites.
 */
export function drawField(
  storm: Storm,
  land: LandIndex,
  net: Net,
  view: DrawView,
  control: Omit<ScoreControl, 'onSite'> = {},
): Float64Array {
  return fieldsOver(storm, land, net, { values: keeperOf(view) }, control).values;
}

// Gusts below the floor may be too low on the net, so no chance is given of them.
function keeperOf(view: DrawView): KeptOfNode {
  switch (view.kind) {
    case 'draw': {
      const { draw } = view;
      if (!Number.isInteger(draw) || draw < 0 || draw >= DRAW_COUNT) {
        throw new DomainError('draw', draw, `a whole number in 0..${DRAW_COUNT - 1}`);
      }
      return (_scores, _node, draws) => draws[draw]!;
    }
    case 'p99':
      return ({ p99 }, node) => p99[node]!;
    case 'chance': {
      const { gust } = view;
      if (!(gust >= GUST_FLOOR))
        throw new DomainError('gust whose chance is asked', gust, `at least ${GUST_FLOOR} m/s`);
      return (_scores, _node, draws) => chanceOf(draws, gust);
    }
  }
}
