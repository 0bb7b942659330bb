import { seaDrag } from '../terrain/drag.ts';
import type { WindOptions } from '../track/options.ts';
import { degrees } from '../units.ts';
import type { SeaWind } from './field-state.ts';
import { makeKepertCircle, writeKepertCircle } from './kepert-circle.ts';
import { DRAG_WIND_SHARE } from './kepert-maximum.ts';
import { profileSlope, type RadialProfile } from './radial-profile.ts';

/**
 * Wind over open sea from the linear boundary layer of a moving vortex.
 *
 * @param options Profile and drag of the sea.
 * @param profile The chosen gradient wind.
 * @returns Wind at a place; its bound around a circle is the sum of the amplitudes.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484.
 */
export function kepertSeaWind(options: WindOptions, profile: RadialProfile): SeaWind {
  const slope = profileSlope(options, profile);
  const circle = makeKepertCircle();
  const write: SeaWind['write'] = (state, r, sinBearing, cosBearing, out) => {
    const { f, speed, sign, headingSin, headingCos } = state;
    const gradient = profile(r, state);
    const drag = seaDrag(DRAG_WIND_SHARE * gradient, options.seaDrag);
    writeKepertCircle(gradient, slope(r, state, gradient), r, f, speed, drag, circle);
    // Angle from the heading, positive in the cyclonic sense.
    const cosine = cosBearing * headingCos + sinBearing * headingSin;
    const sine = sign * (cosBearing * headingSin - sinBearing * headingCos);
    const radial = circle.radial + circle.radialCos * cosine + circle.radialSin * sine;
    const cyclonic = circle.tangential + circle.tangentialCos * cosine + circle.tangentialSin * sine;
    out.gradient = gradient;
    out.eastward = radial * sinBearing - sign * cyclonic * cosBearing;
    out.northward = radial * cosBearing + sign * cyclonic * sinBearing;
  };
  return {
    write,
    explain(state, r, sinBearing, cosBearing, out) {
      write(state, r, sinBearing, cosBearing, out);
      out.surface = Math.hypot(circle.radial, circle.tangential);
      out.surfaceFactor = out.gradient > 0 ? out.surface / out.gradient : 0;
      out.inflowDeg = degrees(Math.atan2(-circle.radial, circle.tangential));
    },
    bound(state, r) {
      const gradient = profile(r, state);
      const drag = seaDrag(DRAG_WIND_SHARE * gradient, options.seaDrag);
      writeKepertCircle(gradient, slope(r, state, gradient), r, state.f, state.speed, drag, circle);
      const radial = Math.abs(circle.radial) + Math.hypot(circle.radialCos, circle.radialSin);
      const cyclonic = Math.abs(circle.tangential) + Math.hypot(circle.tangentialCos, circle.tangentialSin);
      return Math.hypot(radial, cyclonic);
    },
  };
}
