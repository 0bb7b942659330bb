import { chanceFields, drawField } from '#engine/footprint/draw-fields.ts';
import type { Net } from '#engine/footprint/grid.ts';
import { scoreSites, type ScoreControl, type SiteBatch } from '#engine/footprint/site-peaks.ts';
import type { Area } from '#engine/footprint/strong-wind-area.ts';
import type { LandIndex } from '#engine/geo/land.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { VORTEX_REACH } from '#engine/ring/draws.ts';
import { STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { radians } from '#engine/units.ts';
import { bandsOf, CHANCE_LEVELS, chanceBands, GUST_LEVELS, type Bands } from './bands.ts';

/** A picture made of the 264 draws: the gust in one of them (0..263), a high percentile, or the chance of a gust [m/s]. */
export type DrawView =
  | { readonly kind: 'draw'; readonly draw: number }
  | { readonly kind: 'p99' }
  | { readonly kind: 'chance'; readonly gust: number };

type Control = Pick<ScoreControl, 'shouldStop'>;

/** Filled bands of a view of the draws, over the net of the stored footprint. */
export const drawBands = (storm: Storm, land: LandIndex, net: Net, view: DrawView, control: Control): Bands => {
  if (view.kind === 'chance') {
    return chanceBands(net, chanceFields(storm, land, net, CHANCE_LEVELS, control), view.gust);
  }
  return bandsOf(net, drawField(storm, land, net, view.kind === 'p99' ? 'p99' : view.draw, control), GUST_LEVELS);
};

/** Where a draw changes the gust, and what it makes of it. */
export const sitesInDraw = (storm: Storm, sites: SiteBatch, draw: number, control: Control) => {
  const site: number[] = [];
  const gustMs: number[] = [];
  const onSite: ScoreControl['onSite'] = (index, { plainGust }, draws) => {
    const gust = draws[draw]!;
    if (gust === plainGust[index]) return;
    site.push(index);
    gustMs.push(gust);
  };
  scoreSites(storm, sites, REFERENCE_CURVE, { ...control, onSite });
  return { site: Int32Array.from(site), gustMs: Float64Array.from(gustMs) };
};

const METRES_PER_DEGREE = 111_195;

/** A rectangle that holds every place the vortices reach, in longitudes that run on; null where there are none. */
export const layerArea = ({ states, stateCount, wavenumber }: Storm): Area | null => {
  if (wavenumber === null) return null;
  const area = { west: Infinity, south: Infinity, east: -Infinity, north: -Infinity };
  let last: number | null = null;
  for (let k = 0; k < stateCount; k++) {
    const state = (offset: number) => states[k * STATE_SIZE + offset]!;
    const latitude = state(STATE.latitude);
    const near: number = last ?? state(STATE.longitude);
    const longitude = state(STATE.longitude) + 360 * Math.round((near - state(STATE.longitude)) / 360);
    last = longitude;
    if (!(state(STATE.vortexWind) > 0)) continue;
    const north = (VORTEX_REACH * state(STATE.rMax)) / METRES_PER_DEGREE;
    // At the poleward edge a degree of longitude is shortest.
    const east = north / Math.max(Math.cos(radians(Math.min(Math.abs(latitude) + north, 89))), 0.01);
    area.west = Math.min(area.west, longitude - east);
    area.east = Math.max(area.east, longitude + east);
    area.south = Math.min(area.south, latitude - north);
    area.north = Math.max(area.north, latitude + north);
  }
  return area.west <= area.east ? area : null;
};
