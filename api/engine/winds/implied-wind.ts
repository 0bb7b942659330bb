import { AIR_DENSITY, MOTION_SHARE } from '../constants.ts';
import { oneMinuteOverTen, type WindOptions } from '../track/options.ts';
import { hollandGradientWind } from './holland-1980.ts';
import { clampedB, hollandSurfaceB, powellB, vickeryWadheraB, willoughbyRahnB } from './holland-b.ts';
import { INNER_FACTOR, SURFACE_FACTORS } from './surface-factor.ts';
import { strongestWind } from './vortex-fit.ts';

/** 10-min 10-m wind over gradient wind inside 100 km for a storm known by its pressure [1]. Holland et al. (2010), from memory. */
const PRESSURE_SURFACE_FACTOR = 0.8;
const FIXED_POINT_STEPS = 60;

/** A storm known by its pressure. */
export type PressureStorm = {
  /** Central pressure [Pa]. */
  readonly central: number;
  /** Pressure deficit [Pa], > 0. */
  readonly deficit: number;
  /** Rate of change of the central pressure [Pa s⁻¹]. */
  readonly tendency: number;
  /** Radius of maximum wind [m]. */
  readonly rMax: number;
  /** [deg] */
  readonly latitude: number;
  /** Coriolis parameter, a magnitude [s⁻¹]. */
  readonly f: number;
  /** Translation speed [m s⁻¹]. */
  readonly speed: number;
};

/**
 * Shape parameter of the gradient wind that the chosen relation gives a storm.
 *
 * @param storm    The storm.
 * @param relation The relation; Holland (2008) gives the surface wind instead and is not among them.
 * @returns B in 0.8..2.5 [1].
 * @source The relation. Willoughby & Rahn (2004) ask for the maximum gradient wind, which is the one B gives: solved by
 *         repetition.
 */
export function relationB(
  { central, deficit, rMax, latitude, f }: PressureStorm,
  relation: Exclude<WindOptions['shapeRelation'], 'holland-2008'>,
): number {
  switch (relation) {
    case 'vickery-wadhera-2008':
      return clampedB(vickeryWadheraB(rMax, f, deficit, central));
    case 'powell-2005':
      return clampedB(powellB(rMax, latitude));
    case 'willoughby-rahn-2004': {
      let b = 1.5;
      for (let k = 0; k < FIXED_POINT_STEPS; k++) {
        b = clampedB(willoughbyRahnB(hollandGradientWind(rMax, { rMax, b, deficit, f }), rMax, latitude));
      }
      return b;
    }
  }
}

/**
 * Surface factor of a fix over the chosen one. Where B is fitted to the maximum wind it is 1, for the fit has the maximum
 * anyway. Where B comes from the relation, a storm known by its pressure keeps the factor 0.80 with which its maximum is
 * implied, so that maximum, B and pressure belong together.
 *
 * @param isByPressure Whether the pressure sets the intensity of the fix.
 * @param options      Shape source, shape relation and surface factor.
 * @returns Factor [1].
 * @source Product rule; Holland (2008) speaks of the surface wind already.
 */
export function surfaceShare(isByPressure: boolean, options: WindOptions): number {
  const keeps =
    options.shapeSource === 'relation' &&
    isByPressure &&
    options.surfaceFactor === 'franklin' &&
    options.shapeRelation !== 'holland-2008';
  return keeps ? PRESSURE_SURFACE_FACTOR / INNER_FACTOR : 1;
}

/**
 * Maximum 1-min wind that a central pressure implies.
 *
 * @param storm   The storm.
 * @param options Shape relation, surface factor and averaging; where B comes from the relation, the asymmetry too.
 * @param share   Surface factor of the fix over the chosen one [1].
 * @returns Maximum 1-min wind, motion included [m s⁻¹].
 * @source Holland (1980) with B of the relation, by default Vickery & Wadhera (2008); 10-min surface wind 0.80 of the
 *         gradient wind within 100 km (Holland, Belanger & Fritz 2010, from memory), another chosen factor as it is; motion
 *         of Lin & Chavas (2012). Holland (2008): √(bs deficit / (ρ e)), which is the surface wind itself.
 */
export function impliedMaxWind(storm: PressureStorm, options: WindOptions, share = 1): number {
  const { deficit, tendency, rMax, latitude, f, speed } = storm;
  if (options.shapeRelation === 'holland-2008') {
    return Math.sqrt((hollandSurfaceB(deficit, tendency, latitude, speed) * deficit) / (AIR_DENSITY * Math.E));
  }
  const b = relationB(storm, options.shapeRelation);
  const gradient = hollandGradientWind(rMax, { rMax, b, deficit, f });
  if (options.shapeSource === 'relation') return strongestWind(gradient, speed, rMax, f, options, share);
  const chosen = SURFACE_FACTORS[options.surfaceFactor](rMax);
  const surface =
    (options.surfaceFactor === 'franklin' ? (PRESSURE_SURFACE_FACTOR / INNER_FACTOR) * chosen : chosen) * gradient;
  return oneMinuteOverTen(options.averaging) * (surface + MOTION_SHARE * speed);
}
