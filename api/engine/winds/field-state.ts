import type { WindOptions } from '../track/options.ts';
import { radians } from '../units.ts';
import { profileState, type OuterWind, type ProfileState } from './radial-profile.ts';
import type { FittedVortex } from './vortex-fit.ts';
import type { QuadrantFactors } from './wind-radii.ts';

/** Everything the wind over open sea needs to know of a storm at one time; plain data. */
export type FieldState = ProfileState & {
  /** 1 in the northern, -1 in the southern hemisphere [1]. */
  readonly sign: number;
  /** Translation speed [m s⁻¹]. */
  readonly speed: number;
  /** Sine and cosine of the heading [1]. */
  readonly headingSin: number;
  readonly headingCos: number;
  /** Maximum 1-min wind, motion included [m s⁻¹]. */
  readonly maxWind: number;
  /** Wind added by the motion after Lin & Chavas: eastward and northward [m s⁻¹]. */
  readonly motionU: number;
  readonly motionV: number;
  /** Logarithms of the factors in the quadrants NE, SE, SW, NW beyond the radius of maximum wind [1]; null for none. */
  readonly quadrants: QuadrantFactors | null;
};

/**
 * Gathers what the chosen wind field needs to know of a storm at one time.
 *
 * @param storm   Matched vortex, place and motion of the centre, maximum 1-min wind [m s⁻¹], wind added by the motion
 *                [m s⁻¹], surface factor over the chosen one [1], outer wind and log-factors of the quadrants.
 * @param options The choices.
 * @returns Plain data.
 * @source Arrangement only.
 */
export function fieldStateOf(
  storm: {
    readonly vortex: FittedVortex;
    readonly latitude: number;
    readonly sign: number;
    readonly speed: number;
    /** Bearing TOWARDS which the centre moves [deg]. */
    readonly heading: number;
    readonly maxWind: number;
    readonly motion: { readonly u: number; readonly v: number };
    readonly surfaceShare: number;
    readonly outer: OuterWind | null;
    readonly quadrants: QuadrantFactors | null;
  },
  options: WindOptions,
): FieldState {
  return {
    ...profileState(storm.vortex, storm.latitude, storm.surfaceShare, storm.outer, options),
    sign: storm.sign,
    speed: storm.speed,
    headingSin: Math.sin(radians(storm.heading)),
    headingCos: Math.cos(radians(storm.heading)),
    maxWind: storm.maxWind,
    motionU: storm.motion.u,
    motionV: storm.motion.v,
    quadrants: storm.quadrants,
  };
}

/** The wind over open sea at one place, and how it comes about; rewritten in place. 10-min winds at 10 m [m s⁻¹]. */
export type SeaWindSteps = {
  /** Gradient wind of the symmetric vortex. */
  gradient: number;
  /** Symmetric surface wind over gradient wind [1]. */
  surfaceFactor: number;
  /** Symmetric surface wind. */
  surface: number;
  /** Angle by which it turns inwards [deg]. */
  inflowDeg: number;
  /** The wind with the storm's motion; where it blows TO: eastward and northward. */
  eastward: number;
  northward: number;
};

type SeaWindWriter = (state: FieldState, r: number, sinBearing: number, cosBearing: number, out: SeaWindSteps) => void;

/** Wind over open sea of a storm, composed from the chosen relations. */
export type SeaWind = {
  /** Writes the wind at a distance [m, ≥ 1] and bearing from the centre, given by its sine and cosine: two components. */
  readonly write: SeaWindWriter;
  /** The same with every step. */
  readonly explain: SeaWindWriter;
  /** A wind that is nowhere exceeded on the circle [m s⁻¹]. */
  readonly bound: (state: FieldState, r: number) => number;
};

/**
 * Makes steps to be filled.
 *
 * @returns Steps without wind.
 * @source Workspace only.
 */
export function makeSeaWindSteps(): SeaWindSteps {
  return { gradient: 0, surfaceFactor: 0, surface: 0, inflowDeg: 0, eastward: 0, northward: 0 };
}
