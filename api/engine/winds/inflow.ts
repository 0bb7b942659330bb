/**
 * Angle by which the surface wind turns inwards.
 *
 * @param x Distance from the centre over the radius of maximum wind [1], ≥ 0.
 * @returns Inflow angle [deg]: 10 at the centre, 20 at the radius of maximum wind, 25 from 1.2 of it on. NaN for NaN.
 * @source Bretschneider (1972) as used by Phadke et al. (2003), Ocean Eng. 30, 553–578; from memory.
 */
export function inflowAngle(x: number): number {
  if (x < 1) return 10 * (1 + x);
  if (x < 1.2) return 20 + 25 * (x - 1);
  return x >= 1.2 ? 25 : NaN;
}
