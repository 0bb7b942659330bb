import { REFERENCE_HEIGHT } from '../constants.ts';

/** Number of directions in which the overland distance is known; wind FROM 0, 45, ..., 315 degrees. */
export const SECTOR_COUNT = 8;

const FULL_DEPTH = 600;

/**
 * Depth of the layer that has settled to the land after some way over it.
 *
 * @param fetch Overland distance upwind [m], > 0.
 * @param z0    Roughness length of the land [m].
 * @returns Depth [m].
 * @source Wood (1982), Atmos. Environ. 16, 2009–2012; from memory.
 */
export function internalLayerDepth(fetch: number, z0: number): number {
  return 0.28 * z0 * (fetch / z0) ** 0.8;
}

/**
 * How far the wind at 10 m has settled to the land: 0 at the coast, 1 where the settled layer is 600 m deep.
 *
 * @param fetch Overland distance upwind [m]; 0 or less = none.
 * @param z0    Roughness length of the land [m], > 0.
 * @returns Weight of the land in 0..1 [1].
 * @source Logarithmic in the depth of Wood (1982) between 10 m and 600 m; product rule.
 */
export function fetchWeight(fetch: number, z0: number): number {
  if (fetch <= 0) return 0;
  const share = Math.log(internalLayerDepth(fetch, z0) / REFERENCE_HEIGHT) / Math.log(FULL_DEPTH / REFERENCE_HEIGHT);
  return Math.min(Math.max(share, 0), 1);
}

/**
 * Weight of the land for a wind direction. Weights, not metres, are interpolated: a long sector would swamp a short one.
 *
 * @param weights   Weights for wind FROM 0, 45, ..., 315 degrees [1], shape (8,).
 * @param direction Direction the wind comes FROM [deg], 0 ≤ direction < 360.
 * @returns Weight in 0..1 [1].
 * @source Linear in direction, around the circle.
 */
export function sectorWeight(weights: ArrayLike<number>, direction: number): number {
  const place = direction / 45;
  const sector = Math.floor(place);
  const share = place - sector;
  return weights[sector % SECTOR_COUNT]! * (1 - share) + weights[(sector + 1) % SECTOR_COUNT]! * share;
}
