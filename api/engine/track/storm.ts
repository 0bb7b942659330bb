import { AIR_DENSITY, EARTH_RADIUS, LEAST_PRESSURE_DEFICIT } from '../constants.ts';
import { unitVector } from '../geo/geodesy.ts';
import type { LandIndex } from '../geo/land.ts';
import { inlandFade } from '../ring/amplitude.ts';
import { VORTEX_REACH } from '../ring/draws.ts';
import { amplitudeNodes } from '../ring/regimes.ts';
import type { ObservedVortices } from '../ring/observed-vortices.ts';
import { radians } from '../units.ts';
import { motionWind } from '../winds/asymmetry.ts';
import { coriolis, hemisphereSign } from '../winds/coriolis.ts';
import { fieldStateOf, type FieldState } from '../winds/field-state.ts';
import { impliedMaxWind, surfaceShare } from '../winds/implied-wind.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import { hollandGradientWind } from '../winds/holland-1980.ts';
import { fitVortex, strongestWind } from '../winds/vortex-fit.ts';
import type { Conditioned } from './conditioning.ts';
import type { EngineNotice, ResolvedFix, TrackFix } from './fixes.ts';
import { motionAt } from './motion.ts';
import { oneMinuteOverTen, usesDefaultSeaWind, type ChainOptions } from './options.ts';
import { pressureTendencies } from './intensity.ts';
import { outerWindAt } from './outer-wind.ts';
import { patternAngleAt, patternAngles } from './pattern-angle.ts';
import { legAt, positionAt } from './position.ts';
import { writeQuietDistances, writeQuietDistancesBelow } from './quiet-distance.ts';
import { resolveFixes, type TrackResolution } from './resolution.ts';
import { timeGrid } from './time-grid.ts';

/** Numbers per state in `Storm.states`; the offsets are in STATE. */
export const STATE_SIZE = 48;
/** Offsets of a state's quantities, in the order in which the kernel reads them. */
export const STATE = {
  /** Unit vector of the centre, and of east and north there [1]. */
  x: 0,
  y: 1,
  z: 2,
  eastX: 3,
  eastY: 4,
  northX: 5,
  northY: 6,
  northZ: 7,
  /** ln of the radius of maximum wind [ln m]. */
  logRMax: 8,
  /** Holland B [1]. */
  b: 9,
  /** B deficit / density [m² s⁻²]. */
  energy: 10,
  /** Half the Coriolis parameter [s⁻¹]. */
  halfF: 11,
  /** 1 north, -1 south [1]. */
  sign: 12,
  /** Wind added by the motion, eastward and northward [m s⁻¹]. */
  motionU: 13,
  motionV: 14,
  /** One over the radius of maximum wind [m⁻¹]. */
  perRMax: 15,
  /** Vortex amplitude times axisymmetric maximum, as a 10-min wind [m s⁻¹]. */
  vortexWind: 16,
  /** Cosine and sine of wavenumber times pattern angle [1]. */
  patternCos: 17,
  patternSin: 18,
  /** Squared chord within which the neighbouring intervals are refined [1]. */
  nearChord2: 19,
  timeS: 20,
  latitude: 21,
  longitude: 22,
  rMax: 23,
  deficit: 24,
  speed: 25,
  heading: 26,
  patternAngle: 27,
  /** Squared chords beyond which the open-sea wind stays below 2, 3, ..., 21 m/s [1]; at outer times only. */
  quietChord2: 28,
} as const;

/** A storm ready to be scored against sites: plain data that can be sent to another thread. */
export type Storm = {
  readonly fixes: readonly ResolvedFix[];
  readonly options: ChainOptions;
  readonly notices: readonly EngineNotice[];
  /** Number of vortices on the ring, null when the layer is off. */
  readonly wavenumber: number | null;
  /** Starting phase of each of the draws' 24 patterns [rad]: evenly spread unless the storm is conditioned. */
  readonly phases: readonly number[];
  /** Strength factors of the draws [1], shape (11,). */
  readonly strengths: readonly number[];
  /** What was observed of the vortices; null where nothing was, or it has no effect. */
  readonly conditioned: Conditioned | null;
  readonly stateCount: number;
  /** States at all outer and inner times, in order of time, shape (stateCount, STATE_SIZE) row-major. */
  readonly states: Float64Array;
  /** Indices of the outer times among the states, shape (outer times,). */
  readonly outer: Int32Array;
  /** What a chosen open-sea wind needs beyond `states`, one entry per state; null under the default one. */
  readonly field: readonly FieldState[] | null;
};

/** A pattern this fast needs the finest step near the centre [rad s⁻¹]. Product rule. */
const FAST_PATTERN = 0.008;
const FAST_STEP = 20;
const LEAST_NEAR_RADIUS = 60_000;

/**
 * Resolves a track and lays out everything about the storm that does not depend on a site.
 *
 * @param fixes   At least two fixes at strictly increasing times.
 * @param options Choices of the chain.
 * @param land    Land polygons for the hours inland, null when there are none to ask.
 * @param observations What radar or satellite showed of the vortices, at times within the track.
 * @returns The storm.
 * @throws {DomainError} when the track, an option or an observation is outside its range, or the track has too many steps.
 * @source Order of this chain.
 */
export function prepareStorm(
  fixes: readonly TrackFix[],
  options: ChainOptions,
  land: LandIndex | null,
  observations: readonly ObservedVortices[] = [],
): Storm {
  const resolution = resolveFixes(fixes, options, land, observations);
  const { fixes: resolved, wavenumber, phases, conditioned, notices } = resolution;
  const isFast = resolved.some(({ patternRadPerS }) => (wavenumber ?? 0) * (patternRadPerS ?? 0) > FAST_PATTERN);
  const grid = timeGrid(
    resolved[0]!.timeS,
    resolved[resolved.length - 1]!.timeS,
    options.timeStepS,
    isFast ? Math.min(options.innerTimeStepS, FAST_STEP) : options.innerTimeStepS,
  );
  const stateCount = grid.timeS.length;
  const states = new Float64Array(stateCount * STATE_SIZE);
  const angles = patternAngles(resolved);
  const tendencies = pressureTendencies(resolved);
  const field: FieldState[] = [];
  for (let k = 0; k < stateCount; k++) {
    const timeS = grid.timeS[k]!;
    field.push(writeState(states, k * STATE_SIZE, resolution, timeS, angles, tendencies, options));
  }
  const strengths = amplitudeNodes(options.regime);
  const storm = { fixes: resolved, options, notices, wavenumber, phases, strengths, conditioned, stateCount, states };
  if (usesDefaultSeaWind(options)) {
    for (const k of grid.outer) writeQuiet(states, k * STATE_SIZE);
    return { ...storm, outer: grid.outer, field: null };
  }
  const { bound } = seaWindOf(options);
  for (const k of grid.outer) {
    const state = field[k]!;
    writeQuietDistancesBelow((r) => bound(state, r), state.rMax, states, k * STATE_SIZE + STATE.quietChord2);
  }
  return { ...storm, outer: grid.outer, field };
}

function writeState(
  states: Float64Array,
  at: number,
  { fixes, wavenumber, hoursInland, weakening, outer }: TrackResolution,
  timeS: number,
  angles: readonly number[],
  tendencies: readonly number[],
  options: ChainOptions,
): FieldState {
  const i = legAt(fixes, timeS);
  const a = fixes[i]!;
  const b = fixes[i + 1]!;
  const share = (timeS - a.timeS) / (b.timeS - a.timeS);
  const mix = (from: number, to: number): number => from + share * (to - from);
  const place = positionAt(fixes, timeS);
  const { speed, heading } = motionAt(fixes, timeS);
  const sign = hemisphereSign(place.latitude);
  const rMax = mix(a.radiusOfMaxWindM, b.radiusOfMaxWindM);
  const ambient = mix(a.ambientPressurePa, b.ambientPressurePa);
  const central = mix(a.centralPressurePa, b.centralPressurePa);
  const weakened = weakening && weakening(timeS);
  const f = coriolis(place.latitude);
  const deficit = Math.max(weakened?.deficit ?? ambient - central, LEAST_PRESSURE_DEFICIT);
  const ofSurface = mix(shareOf(a, options), shareOf(b, options));
  let maxWind = mix(a.anchoredMaxWindMs, b.anchoredMaxWindMs);
  const held = mix(heldShare(a), heldShare(b));
  if (weakened) maxWind = held * weakened.maxWind;
  else if (options.shapeSource === 'relation') {
    // The relation holds at every time, not at the fixes alone.
    const { latitude } = place;
    const tendency = mix(tendencies[i]!, tendencies[i + 1]!);
    maxWind = held * impliedMaxWind({ central, deficit, tendency, rMax, latitude, f, speed }, options, ofSurface);
  }
  const vortex = fitVortex(maxWind, speed, rMax, f, deficit, options, ofSurface);
  const wind = motionWind(speed, heading, sign);
  const [x, y, z] = unitVector(place);
  const lambda = radians(place.longitude);
  const sinLambda = Math.sin(lambda);
  const cosLambda = Math.cos(lambda);
  const nearAngle = Math.min(Math.max(VORTEX_REACH * rMax, LEAST_NEAR_RADIUS) / EARTH_RADIUS, Math.PI);
  const vortexMax = mix(a.axisymmetricMaxWindMs, b.axisymmetricMaxWindMs);
  const amplitude = wavenumber === null ? 0 : mix(a.amplitude, b.amplitude) * inlandFade(hoursInland(timeS));
  const patternAngle = wavenumber === null ? 0 : patternAngleAt(fixes, angles, timeS);
  const turned = (wavenumber ?? 0) * patternAngle;
  states[at + STATE.x] = x;
  states[at + STATE.y] = y;
  states[at + STATE.z] = z;
  states[at + STATE.eastX] = -sinLambda;
  states[at + STATE.eastY] = cosLambda;
  states[at + STATE.northX] = -z * cosLambda;
  states[at + STATE.northY] = -z * sinLambda;
  states[at + STATE.northZ] = Math.cos(radians(place.latitude));
  states[at + STATE.logRMax] = Math.log(rMax);
  states[at + STATE.b] = vortex.b;
  states[at + STATE.energy] = (vortex.b * vortex.deficit) / AIR_DENSITY;
  states[at + STATE.halfF] = vortex.f / 2;
  states[at + STATE.sign] = sign;
  states[at + STATE.motionU] = wind.u;
  states[at + STATE.motionV] = wind.v;
  states[at + STATE.perRMax] = 1 / rMax;
  states[at + STATE.vortexWind] = (amplitude * vortexMax) / oneMinuteOverTen(options.averaging);
  states[at + STATE.patternCos] = Math.cos(turned);
  states[at + STATE.patternSin] = Math.sin(turned);
  states[at + STATE.nearChord2] = 4 * Math.sin(nearAngle / 2) ** 2;
  states[at + STATE.timeS] = timeS;
  states[at + STATE.latitude] = place.latitude;
  states[at + STATE.longitude] = place.longitude;
  states[at + STATE.rMax] = rMax;
  states[at + STATE.deficit] = vortex.deficit;
  states[at + STATE.speed] = speed;
  states[at + STATE.heading] = heading;
  states[at + STATE.patternAngle] = patternAngle;
  const { latitude } = place;
  const field = { vortex, latitude, sign, speed, heading, maxWind, motion: wind, surfaceShare: ofSurface };
  const fitted = outer === null ? { outer: null, quadrants: null } : outerWindAt(outer, timeS, rMax);
  return fieldStateOf({ ...field, ...fitted }, options);
}

/** What anchoring left of the maximum wind of a fix [1]. */
function heldShare({ anchoredMaxWindMs, maxWindMs }: ResolvedFix): number {
  return maxWindMs > 0 ? anchoredMaxWindMs / maxWindMs : 1;
}

function shareOf({ intensitySource }: ResolvedFix, options: ChainOptions): number {
  return surfaceShare(intensitySource === 'pressure', options);
}

function writeQuiet(states: Float64Array, at: number): void {
  const vortex = {
    rMax: states[at + STATE.rMax]!,
    b: states[at + STATE.b]!,
    deficit: states[at + STATE.deficit]!,
    f: 2 * states[at + STATE.halfF]!,
  };
  const motion = Math.hypot(states[at + STATE.motionU]!, states[at + STATE.motionV]!);
  writeQuietDistances(vortex, motion, states, at + STATE.quietChord2);
}

/**
 * What the wind field needs to know of a state, under any choice of relations.
 *
 * @param storm The storm.
 * @param k     Index of the state.
 * @returns Plain data.
 * @source Under the default field the numbers of `states`, where a vortex stands without what other relations need.
 */
export function fieldAt({ field, states, options }: Storm, k: number): FieldState {
  if (field !== null) return field[k]!;
  const state = (offset: number): number => states[k * STATE_SIZE + offset]!;
  const [rMax, b, deficit, f] = [state(STATE.rMax), state(STATE.b), state(STATE.deficit), 2 * state(STATE.halfF)];
  const gradientMax = hollandGradientWind(rMax, { rMax, b, deficit, f });
  return fieldStateOf(
    {
      vortex: { rMax, b, deficit, f, gradientMax, unclampedB: b },
      latitude: state(STATE.latitude),
      sign: state(STATE.sign),
      speed: state(STATE.speed),
      heading: state(STATE.heading),
      maxWind: strongestWind(gradientMax, state(STATE.speed), rMax, f, options, 1),
      motion: { u: state(STATE.motionU), v: state(STATE.motionV) },
      surfaceShare: 1,
      outer: null,
      quadrants: null,
    },
    options,
  );
}
