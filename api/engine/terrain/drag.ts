import { REFERENCE_HEIGHT, VON_KARMAN } from '../constants.ts';

/** Least and greatest drag coefficient of the sea by the default law [1]. The cap is ours within the published 2.0–2.5 e-3. */
export const DRAG_RANGE = [1.2e-3, 2.4e-3] as const;
/** Drag coefficient of the sea: intercept [1] and slope per m/s [s m⁻¹]. Large & Pond (1981), from memory. */
export const DRAG_LINE = [0.49e-3, 0.065e-3] as const;

/** Laws for the drag of the sea: a line in the wind that levels off at 2.4e-3, at 2.0e-3, or not at all. */
export type SeaDragLaw = 'capped-2.4' | 'capped-2.0' | 'uncapped';

const CAPS: Record<SeaDragLaw, number> = { 'capped-2.4': DRAG_RANGE[1], 'capped-2.0': 2.0e-3, uncapped: Infinity };

/**
 * Drag coefficient of the sea.
 *
 * @param wind 10-min wind at 10 m over open sea [m s⁻¹], ≥ 0.
 * @param law  Where it levels off.
 * @returns Drag coefficient [1]. NaN for NaN.
 * @source Large & Pond (1981), J. Phys. Oceanogr. 11, 324–336, slope; levelling off: Powell, Vickery & Reinhold (2003),
 *         Nature 422, 279–283, who find it between 2.0e-3 and 2.5e-3.
 */
export function seaDrag(wind: number, law: SeaDragLaw = 'capped-2.4'): number {
  return Math.min(Math.max(DRAG_LINE[0] + DRAG_LINE[1] * wind, DRAG_RANGE[0]), CAPS[law]);
}

/**
 * Roughness length that belongs to a drag coefficient at 10 m.
 *
 * @param drag Drag coefficient [1], > 0.
 * @returns Roughness length [m].
 * @source Logarithmic wind profile.
 */
export function roughnessOfDrag(drag: number): number {
  return REFERENCE_HEIGHT * Math.exp(-VON_KARMAN / Math.sqrt(drag));
}

/**
 * Roughness length of the sea under a wind.
 *
 * @param wind 10-min wind at 10 m over open sea [m s⁻¹], ≥ 0.
 * @param law  Where the drag levels off.
 * @returns Roughness length [m].
 * @source Logarithmic wind profile with the drag coefficient of seaDrag.
 */
export function seaRoughness(wind: number, law: SeaDragLaw = 'capped-2.4'): number {
  return roughnessOfDrag(seaDrag(wind, law));
}
