import { LEAST_SYMMETRIC_WIND, MOTION_SHARE } from '../constants.ts';
import { DEFAULT_WIND_OPTIONS, oneMinuteOverTen, type WindOptions } from '../track/options.ts';
import { type HollandVortex } from './holland-1980.ts';
import { clampedB, fittedB } from './holland-b.ts';
import { kepertCoefficients, matchKepertGradient, strongestKepertWind } from './kepert-2001.ts';
import { maximumLayer } from './kepert-maximum.ts';
import { schwerdtAddition } from './schwerdt.ts';
import { SURFACE_FACTORS } from './surface-factor.ts';

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
 * @param maxWind   Maximum 1-min wind [m s⁻¹].
 * @param speed     Translation speed [m s⁻¹].
 * @param averaging Which factor leads from the 1-min to the 10-min wind.
 * @returns 10-min wind [m s⁻¹], at least 5.
 * @source Lin & Chavas (2012), J. Geophys. Res. 117, D09120: the motion adds 0.55 of its speed on the strong side.
 */
export function symmetricWind(
  maxWind: number,
  speed: number,
  averaging: WindOptions['averaging'] = DEFAULT_WIND_OPTIONS.averaging,
): number {
  return Math.max(maxWind / oneMinuteOverTen(averaging) - MOTION_SHARE * speed, LEAST_SYMMETRIC_WIND);
}

/**
 * Holland vortex that has a given maximum wind at the surface; the pressure deficit gives way where B would leave its range.
 *
 * @param maxWind Maximum 1-min wind, motion included [m s⁻¹].
 * @param speed   Translation speed [m s⁻¹].
 * @param rMax    Radius of maximum wind [m].
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param deficit Pressure deficit [Pa], > 0.
 * @param options Asymmetry, surface factor, averaging and profile.
 * @param share   Surface factor of this storm over the chosen one [1]; see surfaceShare.
 * @returns The vortex; its deficit differs from the one given when B was clamped.
 * @source Holland (1980), Mon. Wea. Rev. 108, 1212–1218, solved for B; clamping is a product rule that honours the wind.
 */
export function fitVortex(
  maxWind: number,
  speed: number,
  rMax: number,
  f: number,
  deficit: number,
  options: WindOptions = DEFAULT_WIND_OPTIONS,
  share = 1,
): FittedVortex {
  const gradientMax = matchedGradient(maxWind, speed, rMax, f, options, share);
  const unclampedB = fittedB(gradientMax, rMax, f, deficit);
  const b = clampedB(unclampedB);
  return { rMax, b, f, deficit: b === unclampedB ? deficit : (deficit * unclampedB) / b, gradientMax, unclampedB };
}

/** Gradient wind of the symmetric vortex whose greatest surface wind around the circle at rMax is the maximum. */
function matchedGradient(
  maxWind: number,
  speed: number,
  rMax: number,
  f: number,
  options: WindOptions,
  share: number,
): number {
  const factor = SURFACE_FACTORS[options.surfaceFactor](rMax) * share;
  const mean = maxWind / oneMinuteOverTen(options.averaging);
  switch (options.asymmetry) {
    case 'lin-chavas':
      return symmetricWind(maxWind, speed, options.averaging) / factor;
    case 'none':
      return Math.max(mean, LEAST_SYMMETRIC_WIND) / factor;
    case 'schwerdt':
      return Math.max(mean - schwerdtMean(speed, options), LEAST_SYMMETRIC_WIND) / factor;
    case 'georgiou': {
      // The force of the pressure that gives the wind on the strong side gives this wind on a circle at rest.
      const wind = mean / factor;
      const half = (rMax * f) / 2;
      const force = Math.max(wind * wind - (speed - rMax * f) * wind, 0);
      return Math.max(Math.sqrt(force + half * half) - half, LEAST_SYMMETRIC_WIND / factor);
    }
    case 'kepert':
      return matchKepertGradient(mean, maximumLayer({ rMax, f, speed }, options));
  }
}

/**
 * Greatest 1-min surface wind around the circle at the radius of maximum wind: the inverse of fitVortex.
 *
 * @param gradient Gradient wind of the symmetric vortex there [m s⁻¹].
 * @param speed    Translation speed [m s⁻¹].
 * @param rMax     Radius of maximum wind [m].
 * @param f        Coriolis parameter, a magnitude [s⁻¹].
 * @param options  Asymmetry, surface factor, averaging and profile.
 * @param share    Surface factor of this storm over the chosen one [1].
 * @returns Maximum 1-min wind, motion included [m s⁻¹].
 * @source As the asymmetry: Lin & Chavas (2012), Schwerdt et al. (1979), Georgiou (1985), Kepert (2001).
 */
export function strongestWind(
  gradient: number,
  speed: number,
  rMax: number,
  f: number,
  options: WindOptions,
  share: number,
): number {
  const factor = SURFACE_FACTORS[options.surfaceFactor](rMax) * share;
  const ten = (): number => {
    switch (options.asymmetry) {
      case 'lin-chavas':
        return factor * gradient + MOTION_SHARE * speed;
      case 'none':
        return factor * gradient;
      case 'schwerdt':
        return factor * gradient + schwerdtMean(speed, options);
      case 'georgiou': {
        const half = (speed - rMax * f) / 2;
        return factor * (half + Math.sqrt(half * half + gradient * (gradient + rMax * f)));
      }
      case 'kepert':
        return strongestKepertWind(kepertCoefficients(maximumLayer({ rMax, f, speed }, options)(gradient)));
    }
  };
  return oneMinuteOverTen(options.averaging) * ten();
}

/** Greatest addition of Schwerdt et al. as a 10-min wind. */
function schwerdtMean(speed: number, options: WindOptions): number {
  return schwerdtAddition(speed, 0) / oneMinuteOverTen(options.averaging);
}
