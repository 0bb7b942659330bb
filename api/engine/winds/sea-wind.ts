import { oneMinuteOverTen, type WindOptions } from '../track/options.ts';
import { degrees, radians } from '../units.ts';
import type { FieldState, SeaWind } from './field-state.ts';
import { georgiouWind } from './georgiou.ts';
import { inflowAngle, zhangUhlhornInflow } from './inflow.ts';
import { kepertSeaWind } from './kepert-sea-wind.ts';
import { quadrantSeaWind } from './quadrant-sea-wind.ts';
import { radialProfile, type RadialProfile } from './radial-profile.ts';
import { schwerdtAddition } from './schwerdt.ts';
import { SURFACE_FACTORS } from './surface-factor.ts';

/**
 * Wind over open sea, composed from the chosen profile, surface factor, inflow and asymmetry.
 *
 * @param options The choices. The boundary layer of Kepert takes the place of surface factor and inflow, which are then
 *                without effect.
 * @returns Wind at a place, and its bound around a circle.
 * @source Each part names its own.
 */
export function seaWindOf(options: WindOptions): SeaWind {
  const field = unfittedSeaWind(options);
  return options.quadrants === 'radii' ? quadrantSeaWind(field) : field;
}

function unfittedSeaWind(options: WindOptions): SeaWind {
  const profile = radialProfile(options);
  switch (options.asymmetry) {
    case 'lin-chavas':
      return vectorSeaWind(options, profile, true);
    case 'none':
      return vectorSeaWind(options, profile, false);
    case 'schwerdt':
      return schwerdtSeaWind(options, profile);
    case 'georgiou':
      return georgiouSeaWind(options, profile);
    case 'kepert':
      return kepertSeaWind(options, profile);
  }
}

type Inflow = (state: FieldState, r: number, sinBearing: number, cosBearing: number) => number;

function inflowOf({ inflow }: WindOptions): Inflow {
  if (inflow === 'phadke') return ({ rMax }, r) => inflowAngle(r / rMax);
  return ({ rMax, maxWind, speed, sign, headingSin, headingCos }, r, sinBearing, cosBearing) => {
    const sine = sign * (sinBearing * headingCos - cosBearing * headingSin);
    const cosine = cosBearing * headingCos + sinBearing * headingSin;
    return zhangUhlhornInflow(r / rMax, degrees(Math.atan2(sine, cosine)), maxWind, speed);
  };
}

/** A vortex that blows TOWARDS bearing - sign (90 + inflow), and a wind that is the same everywhere. */
function vectorSeaWind(options: WindOptions, profile: RadialProfile, withMotion: boolean): SeaWind {
  const factor = SURFACE_FACTORS[options.surfaceFactor];
  const inflow = inflowOf(options);
  const write: SeaWind['write'] = (state, r, sinBearing, cosBearing, out) => {
    const { sign } = state;
    out.gradient = profile(r, state);
    out.surfaceFactor = factor(r) * state.surfaceShare;
    out.surface = out.surfaceFactor * out.gradient;
    out.inflowDeg = inflow(state, r, sinBearing, cosBearing);
    const turn = radians(out.inflowDeg);
    const cyclonic = out.surface * Math.cos(turn);
    const inwards = out.surface * Math.sin(turn);
    out.eastward = -sign * cosBearing * cyclonic - sinBearing * inwards + (withMotion ? state.motionU : 0);
    out.northward = sign * sinBearing * cyclonic - cosBearing * inwards + (withMotion ? state.motionV : 0);
  };
  return {
    write,
    explain: write,
    bound(state, r) {
      const motion = withMotion ? Math.hypot(state.motionU, state.motionV) : 0;
      return factor(r) * state.surfaceShare * profile(r, state) + motion;
    },
  };
}

/** Speed added along the wind by the cosine of the angle between heading and wind. */
function schwerdtSeaWind(options: WindOptions, profile: RadialProfile): SeaWind {
  const vortex = vectorSeaWind(options, profile, false);
  const greatest = (state: FieldState): number =>
    schwerdtAddition(state.speed, 0) / oneMinuteOverTen(options.averaging);
  const write: SeaWind['write'] = (state, r, sinBearing, cosBearing, out) => {
    vortex.write(state, r, sinBearing, cosBearing, out);
    if (!(out.surface > 0)) return;
    const { eastward, northward } = out;
    const cosine = (eastward * state.headingSin + northward * state.headingCos) / out.surface;
    const share = Math.max(out.surface + greatest(state) * cosine, 0) / out.surface;
    out.eastward *= share;
    out.northward *= share;
  };
  return { write, explain: write, bound: (state, r) => vortex.bound(state, r) + greatest(state) };
}

/** Gradient wind along the path of a moving parcel, then the surface factor and the inflow. */
function georgiouSeaWind(options: WindOptions, profile: RadialProfile): SeaWind {
  const vortex = vectorSeaWind(options, profile, false);
  const factor = SURFACE_FACTORS[options.surfaceFactor];
  const moving = (state: FieldState, r: number, gradient: number, sideSine: number): number => {
    if (options.profile === 'holland-1980') return georgiouWind(r, state, state.speed, sideSine);
    // Another profile has the force of the pressure that balances its wind on a circle.
    const half = 0.5 * (state.speed * sideSine - state.f * r);
    return half + Math.sqrt(half * half + gradient * (gradient + state.f * r));
  };
  const write: SeaWind['write'] = (state, r, sinBearing, cosBearing, out) => {
    vortex.write(state, r, sinBearing, cosBearing, out);
    if (!(out.surface > 0)) return;
    const side = state.sign * (sinBearing * state.headingCos - cosBearing * state.headingSin);
    const share = (out.surfaceFactor * moving(state, r, out.gradient, side)) / out.surface;
    out.eastward *= share;
    out.northward *= share;
  };
  return {
    write,
    explain: write,
    bound: (state, r) => factor(r) * state.surfaceShare * moving(state, r, profile(r, state), 1),
  };
}
