import { DomainError } from '../errors.ts';

/** Shapes of hills: long ridges, escarpments, and hills round in plan. */
export type HillShape = 'ridge' | 'escarpment' | 'hill';
/** Exposure categories of ASCE 7: suburban, open, and flat with water upwind. */
export type AsceExposure = 'B' | 'C' | 'D';

/** A hill and a place on it. */
export type HillSite = {
  readonly shape: HillShape;
  /** Height of the crest above the terrain upwind [m], ≥ 0. */
  readonly height: number;
  /** Distance upwind of the crest at which the ground is half as high [m], > 0. */
  readonly halfLength: number;
  /** Distance of the site from the crest [m]: negative upwind, positive downwind. */
  readonly distance: number;
  /** Height of the wind above the ground of the site [m], ≥ 0. */
  readonly siteHeight: number;
  readonly exposure: AsceExposure;
};

/** Speed-up at the crest per steepness, by exposure, and decay with height over half length. */
const SHAPES: Record<HillShape, { readonly crest: Record<AsceExposure, number>; readonly decay: number }> = {
  ridge: { crest: { B: 1.3, C: 1.45, D: 1.55 }, decay: 3 },
  escarpment: { crest: { B: 0.75, C: 0.85, D: 0.95 }, decay: 2.5 },
  hill: { crest: { B: 0.95, C: 1.05, D: 1.15 }, decay: 4 },
};
/** Least height that speeds the wind up [m]. */
const LEAST_HEIGHT: Record<AsceExposure, number> = { B: 18, C: 4.5, D: 4.5 };
/** Steepness, height over half length: no speed-up below, no more above [1]. */
const STEEPNESS = [0.2, 0.5] as const;
/** Reach of the speed-up in half lengths, and behind an escarpment [1]. */
const REACH = 1.5;
const REACH_BEHIND_ESCARPMENT = 4;

/**
 * Speed-up of the gust by a hill that stands out from the terrain upwind; a factor on SPEED, the root of the standard's Kzt
 * on pressure.
 *
 * @param hill The hill and the place on it.
 * @returns Factor on the gust [1], ≥ 1: 1 on hills that are too flat (steepness below 0.2) or too low (18 m in exposure B,
 *          4.5 m in C and D).
 * @throws {DomainError} when a length is outside its range.
 * @source ASCE 7-16, section 26.8 and figure 26.8-1; constants from memory. That the hill stands out for 100 times its
 *         height upwind, and by a factor of two over what is within 3.2 km, is left to the person who enters it.
 */
export function topographicFactor(hill: HillSite): number {
  const { shape, height, halfLength, distance, siteHeight, exposure } = hill;
  if (!(height >= 0)) throw new DomainError('height of the hill', height, '≥ 0 m');
  if (!(halfLength > 0)) throw new DomainError('half length of the hill', halfLength, '> 0 m');
  if (!Number.isFinite(distance)) throw new DomainError('distance from the crest', distance, 'a number of metres');
  if (!(siteHeight >= 0)) throw new DomainError('height above ground', siteHeight, '≥ 0 m');
  const steepness = height / halfLength;
  if (steepness < STEEPNESS[0] || height < LEAST_HEIGHT[exposure]) return 1;
  const { crest, decay } = SHAPES[shape];
  const length = steepness > STEEPNESS[1] ? height / STEEPNESS[1] : halfLength;
  const reach = shape === 'escarpment' && distance > 0 ? REACH_BEHIND_ESCARPMENT : REACH;
  const atCrest = crest[exposure] * Math.min(steepness, STEEPNESS[1]);
  const alongWind = Math.max(0, 1 - Math.abs(distance) / (reach * length));
  return 1 + atCrest * alongWind * Math.exp((-decay * siteHeight) / length);
}
