import { seaDrag } from '../terrain/drag.ts';
import type { WindOptions } from '../track/options.ts';
import { degrees } from '../units.ts';
import { EARTH_ROTATION } from '../constants.ts';
import { makeKepertCircle, writeKepertCircle } from './kepert-circle.ts';
import { dualExponential, dualExponentialWind } from './willoughby-2006.ts';

/** 10-min surface wind over gradient wind with which the drag of the sea is found [1]. */
export const DRAG_WIND_SHARE = 0.8;

const AZIMUTHS = 72;
const GRADIENT_RANGE = [5, 150] as const;
const BISECTIONS = 60;
const SLOPE_STEP = 1e-4;

const COS = Float64Array.from({ length: AZIMUTHS }, (_, i) => Math.cos((2 * Math.PI * i) / AZIMUTHS));
const SIN = Float64Array.from({ length: AZIMUTHS }, (_, i) => Math.sin((2 * Math.PI * i) / AZIMUTHS));

/** What the circle at the radius of maximum wind needs beside the gradient wind there. */
export type MaximumCircle = { readonly rMax: number; readonly f: number; readonly speed: number };

/**
 * Greatest 10-min wind over the sea on the circle at the radius of maximum wind, with the linear boundary layer.
 *
 * @param gradient Gradient wind there [m s⁻¹].
 * @param circle   Radius [m], Coriolis parameter, a magnitude [s⁻¹], and translation speed [m s⁻¹].
 * @param options  Profile and drag of the sea.
 * @returns 10-min wind relative to the ground [m s⁻¹], the greatest of 72 azimuths.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484; azimuths 5 degrees apart: product rule.
 */
export function strongestKepertWind(gradient: number, circle: MaximumCircle, options: WindOptions): number {
  const { rMax, f, speed } = circle;
  const drag = seaDrag(DRAG_WIND_SHARE * gradient);
  const c = makeKepertCircle();
  writeKepertCircle(gradient, slopeAtMaximum(gradient, circle, options), rMax, f, speed, drag, c);
  let strongest = 0;
  for (let i = 0; i < AZIMUTHS; i++) {
    const radial = c.radial + c.radialCos * COS[i]! + c.radialSin * SIN[i]!;
    const tangential = c.tangential + c.tangentialCos * COS[i]! + c.tangentialSin * SIN[i]!;
    strongest = Math.max(strongest, radial * radial + tangential * tangential);
  }
  return Math.sqrt(strongest);
}

/**
 * Gradient wind at the radius of maximum wind with which the greatest surface wind on that circle is a given one.
 *
 * @param wind    Greatest 10-min wind [m s⁻¹].
 * @param circle  Radius [m], Coriolis parameter, a magnitude [s⁻¹], and translation speed [m s⁻¹].
 * @param options Profile and drag of the sea.
 * @returns Gradient wind in 5..150 m/s [m s⁻¹].
 * @source Bisection of strongestKepertWind.
 */
export function matchedKepertWind(wind: number, circle: MaximumCircle, options: WindOptions): number {
  let [low, high]: readonly [number, number] = GRADIENT_RANGE;
  for (let k = 0; k < BISECTIONS; k++) {
    const middle = 0.5 * (low + high);
    if (strongestKepertWind(middle, circle, options) < wind) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/** Slope of the gradient wind at the radius of maximum wind [s⁻¹]; that of the Holland profile doesn't depend on B there. */
function slopeAtMaximum(gradient: number, { rMax, f }: MaximumCircle, options: WindOptions): number {
  switch (options.profile) {
    case 'holland-1980':
      return (-0.5 * f * gradient) / (gradient + 0.5 * f * rMax);
    case 'willoughby-2006': {
      const latitude = degrees(Math.asin(Math.min(f / (2 * EARTH_ROTATION), 1)));
      const profile = dualExponential({ maxWind: gradient, rMax, latitude }, false);
      const step = SLOPE_STEP * rMax;
      return (dualExponentialWind(rMax + step, profile) - dualExponentialWind(rMax - step, profile)) / (2 * step);
    }
    default:
      return 0;
  }
}
