import { AIR_DENSITY } from '../constants.ts';
import { DomainError } from '../errors.ts';

/** Parameters of a Holland vortex. */
export type HollandVortex = {
  /** Radius of maximum wind [m]. */
  readonly rMax: number;
  /** Shape parameter B [1]. */
  readonly b: number;
  /** Pressure deficit, ambient less central [Pa]. */
  readonly deficit: number;
  /** Coriolis parameter, a magnitude [s⁻¹]. */
  readonly f: number;
};

/**
 * Gradient wind of a Holland vortex.
 *
 * @param r      Distance from the centre [m]; below 1 m taken as 1 m.
 * @param vortex Its parameters: rMax > 0, b > 0, deficit > 0.
 * @returns Wind above the friction layer [m s⁻¹], ≥ 0. NaN for NaN.
 * @throws {DomainError} when a parameter is outside its range.
 * @source Holland (1980), Mon. Wea. Rev. 108, 1212–1218, eq. 4.
 */
export function hollandGradientWind(r: number, vortex: HollandVortex): number {
  const { rMax, b, deficit, f } = requireVortex(vortex);
  const distance = r < 1 ? 1 : r;
  const x = (rMax / distance) ** b;
  const half = 0.5 * distance * f;
  return Math.sqrt(((b * deficit) / AIR_DENSITY) * x * Math.exp(-x) + half * half) - half;
}

/**
 * Surface pressure of a Holland vortex.
 *
 * @param r       Distance from the centre [m]; below 1 m taken as 1 m.
 * @param central Central pressure [Pa].
 * @param vortex  Its parameters.
 * @returns Pressure [Pa].
 * @throws {DomainError} when a parameter is outside its range.
 * @source Holland (1980), Mon. Wea. Rev. 108, 1212–1218, eq. 2.
 */
export function hollandPressure(r: number, central: number, vortex: HollandVortex): number {
  const { rMax, b, deficit } = requireVortex(vortex);
  return central + deficit * Math.exp(-((rMax / Math.max(r, 1)) ** b));
}

function requireVortex(vortex: HollandVortex): HollandVortex {
  if (!(vortex.rMax > 0)) throw new DomainError('rMax', vortex.rMax, '> 0 m');
  if (!(vortex.b > 0)) throw new DomainError('b', vortex.b, '> 0');
  if (!(vortex.deficit > 0)) throw new DomainError('deficit', vortex.deficit, '> 0 Pa');
  return vortex;
}
