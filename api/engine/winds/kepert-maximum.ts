import { seaDrag } from '../terrain/drag.ts';
import type { WindOptions } from '../track/options.ts';
import { degrees } from '../units.ts';
import { EARTH_ROTATION } from '../constants.ts';
import { KEPERT_DIFFUSIVITY, type BoundaryLayer } from './kepert-2001.ts';
import { dualExponential, dualExponentialWind } from './willoughby-2006.ts';

/** 10-min surface wind over gradient wind with which the drag of the sea is found [1]. */
export const DRAG_WIND_SHARE = 0.8;

const SLOPE_STEP = 1e-4;

/** What the circle at the radius of maximum wind needs beside the gradient wind there. */
export type MaximumCircle = { readonly rMax: number; readonly f: number; readonly speed: number };

/**
 * Boundary layer on the circle at the radius of maximum wind, under a gradient wind there.
 *
 * @param circle  Radius [m], Coriolis parameter, a magnitude [s⁻¹], and translation speed [m s⁻¹].
 * @param options Profile and drag of the sea.
 * @returns The layer as a function of the gradient wind [m s⁻¹].
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484.
 */
export function maximumLayer(circle: MaximumCircle, options: WindOptions): (gradient: number) => BoundaryLayer {
  return (gradient) => ({
    speed: gradient,
    slope: slopeAtMaximum(gradient, circle, options),
    r: circle.rMax,
    f: circle.f,
    motion: circle.speed,
    drag: seaDrag(DRAG_WIND_SHARE * gradient, options.seaDrag),
    diffusivity: KEPERT_DIFFUSIVITY,
  });
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
