import { AIR_DENSITY } from '../constants.ts';
import type { WindOptions } from '../track/options.ts';
import { hollandSurfaceWind, type SurfaceProfile } from './holland-2010.ts';
import { SURFACE_FACTORS } from './surface-factor.ts';
import type { FittedVortex } from './vortex-fit.ts';
import { dualExponential, dualExponentialWind, type DualExponential } from './willoughby-2006.ts';

/** An exponent of the outer profile and the radius from which on it holds [1, m]. */
export type OuterWind = { readonly outerRadius: number; readonly outerExponent: number };

/** A matched vortex with what the chosen profile needs ready; plain data. */
export type ProfileState = FittedVortex & {
  /** Surface factor of this storm over the chosen one [1]. */
  readonly surfaceShare: number;
  /** Holland et al. (2010); null under another profile. */
  readonly revised: SurfaceProfile | null;
  /** Willoughby et al. (2006); null under another profile. */
  readonly dual: DualExponential | null;
};

/** Symmetric gradient wind [m s⁻¹] at a distance [m, > 0]. */
export type RadialProfile = (r: number, state: ProfileState) => number;

/** Where the plain profile ends if no outer wind is known: anywhere, for its exponent stays. */
const NO_OUTER_WIND = { outerRadius: 1e9, outerExponent: 0.5 };
const SLOPE_STEP = 1e-5;
/** Keeps the slope a number where there is neither wind nor rotation of the earth [m s⁻¹]. */
const LEAST_TURNING = 1e-9;

/**
 * Makes a matched vortex ready for the chosen profile, which takes its maximum from it.
 *
 * @param vortex   The vortex.
 * @param latitude Latitude of the centre [deg].
 * @param share    Surface factor of this storm over the chosen one [1].
 * @param outer    Outer wind of the revised Holland profile, null for none.
 * @param options  Profile, surface factor, asymmetry.
 * @returns The vortex with its profile.
 * @source Holland et al. (2010): the maximum of the surface wind, B of the matched vortex as shape. Willoughby et al.
 *         (2006): the maximum of the gradient wind.
 */
export function profileState(
  vortex: FittedVortex,
  latitude: number,
  share: number,
  outer: OuterWind | null,
  options: WindOptions,
): ProfileState {
  const { rMax, b, gradientMax } = vortex;
  const isRevised = options.profile === 'holland-2010';
  const isDual = options.profile === 'willoughby-2006' || options.profile === 'willoughby-2006-exact-peak';
  const isExact = options.profile === 'willoughby-2006-exact-peak';
  return {
    ...vortex,
    surfaceShare: share,
    revised: isRevised
      ? { maxWind: gradientMax * surfaceRatio(rMax, share, options), rMax, bs: b, ...(outer ?? NO_OUTER_WIND) }
      : null,
    dual: isDual ? dualExponential({ maxWind: gradientMax, rMax, latitude }, isExact) : null,
  };
}

/**
 * The chosen radial profile.
 *
 * @param options Profile, surface factor, asymmetry.
 * @returns Gradient wind as a function of distance and matched vortex. The revised Holland profile is one of the surface:
 *          its gradient wind is that over the surface factor, so that the factor brings it back and isn't used twice.
 * @source Holland (1980); Holland et al. (2010); Willoughby et al. (2006).
 */
export function radialProfile(options: WindOptions): RadialProfile {
  switch (options.profile) {
    case 'holland-1980':
      return leanHollandWind;
    case 'holland-2010':
      return (r, state) => hollandSurfaceWind(r, state.revised!) / surfaceRatio(r, state.surfaceShare, options);
    case 'willoughby-2006':
    case 'willoughby-2006-exact-peak':
      return (r, { dual }) => dualExponentialWind(r, dual!);
  }
}

/** Holland (1980) for the inner loop: the parameters are those of a matched vortex, and a logarithm costs less than a power. */
function leanHollandWind(r: number, { rMax, b, deficit, f }: ProfileState): number {
  const distance = r < 1 ? 1 : r;
  const x = Math.exp(b * Math.log(rMax / distance));
  const half = 0.5 * distance * f;
  return Math.sqrt(((b * deficit) / AIR_DENSITY) * x * Math.exp(-x) + half * half) - half;
}

/** Surface over gradient wind of the revised profile; the boundary layer of Kepert makes the surface wind itself. */
function surfaceRatio(r: number, share: number, options: WindOptions): number {
  return options.asymmetry === 'kepert' ? 1 : SURFACE_FACTORS[options.surfaceFactor](r) * share;
}

/**
 * Slope of the chosen profile.
 *
 * @param options Profile.
 * @param profile The profile itself.
 * @returns Derivative of the gradient wind with distance [s⁻¹] as a function of distance, vortex and the wind there.
 * @source Holland (1980), differentiated; else a central difference over 2e-5 of the distance.
 */
export function profileSlope(
  options: WindOptions,
  profile: RadialProfile,
): (r: number, state: ProfileState, wind: number) => number {
  if (options.profile === 'holland-1980') {
    return (r, { rMax, b, f }, wind) => {
      // The force P = V (V + r f) has the slope P B (x - 1) / r.
      const x = Math.exp(b * Math.log(rMax / r));
      const force = wind * (wind + r * f);
      return ((force * b * (x - 1)) / r - f * wind) / Math.max(2 * wind + r * f, LEAST_TURNING);
    };
  }
  return (r, state) => {
    const step = SLOPE_STEP * r;
    return (profile(r + step, state) - profile(r - step, state)) / (2 * step);
  };
}
