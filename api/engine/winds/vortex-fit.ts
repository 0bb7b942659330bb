import { LEAST_SYMMETRIC_WIND, MOTION_SHARE, ONE_MINUTE_OVER_TEN } from '../constants.ts';
import { hollandGradientWind, type HollandVortex } from './holland-1980.ts';
import { clampedB, fittedB, vickeryWadheraB } from './holland-b.ts';
import { INNER_FACTOR, surfaceFactor } from './surface-factor.ts';

/** 10-min 10-m wind over gradient wind inside 100 km for a storm known by its pressure [1]. Holland et al. (2010), from memory. */
const PRESSURE_SURFACE_FACTOR = 0.8;

/** A vortex matched to a maximum wind. */
export type FittedVortex = HollandVortex & {
  /** Gradient wind at the radius of maximum wind [m s⁻¹]. */
  readonly gradientMax: number;
  /** Shape parameter before it was clamped [1]. */
  readonly unclampedB: number;
};

/**
 * Symmetric 10-min wind that is left of a maximum when the storm's own motion is taken out.
 *
 * @param maxWind Maximum 1-min wind [m s⁻¹].
 * @param speed   Translation speed [m s⁻¹].
 * @returns 10-min wind [m s⁻¹], at least 5.
 * @source Lin & Chavas (2012), J. Geophys. Res. 117, D09120: the motion adds 0.55 of its speed on the strong side.
 */
export function symmetricWind(maxWind: number, speed: number): number {
  return Math.max(maxWind / ONE_MINUTE_OVER_TEN - MOTION_SHARE * speed, LEAST_SYMMETRIC_WIND);
}

/**
 * Holland vortex that has a given maximum wind at the surface; the pressure deficit gives way where B would leave its range.
 *
 * @param maxWind Maximum 1-min wind, motion included [m s⁻¹].
 * @param speed   Translation speed [m s⁻¹].
 * @param rMax    Radius of maximum wind [m].
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param deficit Pressure deficit [Pa], > 0.
 * @returns The vortex; its deficit differs from the one given when B was clamped.
 * @source Holland (1980), Mon. Wea. Rev. 108, 1212–1218, solved for B; clamping is a product rule that honours the wind.
 */
export function fitVortex(maxWind: number, speed: number, rMax: number, f: number, deficit: number): FittedVortex {
  const gradientMax = symmetricWind(maxWind, speed) / surfaceFactor(rMax);
  const unclampedB = fittedB(gradientMax, rMax, f, deficit);
  const b = clampedB(unclampedB);
  return { rMax, b, f, deficit: b === unclampedB ? deficit : (deficit * unclampedB) / b, gradientMax, unclampedB };
}

/**
 * Maximum 1-min wind that a central pressure implies.
 *
 * @param central Central pressure [Pa].
 * @param deficit Pressure deficit [Pa], > 0.
 * @param rMax    Radius of maximum wind [m].
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param speed   Translation speed [m s⁻¹].
 * @returns Maximum 1-min wind, motion included [m s⁻¹].
 * @source Holland (1980) with B of Vickery & Wadhera (2008), 10-min surface wind 0.80 of the gradient wind within 100 km
 *         (Holland, Belanger & Fritz 2010, from memory), motion of Lin & Chavas (2012).
 */
export function impliedMaxWind(central: number, deficit: number, rMax: number, f: number, speed: number): number {
  const b = clampedB(vickeryWadheraB(rMax, f, deficit, central));
  const gradient = hollandGradientWind(rMax, { rMax, b, deficit, f });
  const surface = (PRESSURE_SURFACE_FACTOR / INNER_FACTOR) * surfaceFactor(rMax) * gradient;
  return ONE_MINUTE_OVER_TEN * (surface + MOTION_SHARE * speed);
}
