import { EARTH_RADIUS } from '../constants.ts';
import { radialShape, startingPhase } from '../ring/draws.ts';
import { DRAG_LINE, DRAG_RANGE, roughnessOfDrag } from '../terrain/drag.ts';
import { roughnessFactor } from '../terrain/roughness.ts';
import { FIRST_QUIET_WIND, QUIET_WIND_COUNT } from '../track/quiet-distance.ts';
import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { quickLog } from '../numerics/quick-log.ts';
import { radians } from '../units.ts';
import { INNER_FACTOR, INNER_RADIUS, OUTER_FACTOR, OUTER_RADIUS } from '../winds/surface-factor.ts';
import {
  chosenGreatestFactor,
  chosenGroundOf,
  chosenGusts,
  chosenSeaWindOf,
  chosenSeaWinds,
  type ChosenGround,
  type ChosenSeaWind,
} from './chosen-passage.ts';
import { PEAK_FACTOR, type Exposure } from './exposure.ts';
import { DRAG_WINDS, EIGHTH_TURN, PER_SEA_FACTOR, PRESSURE_TERM, PRESSURE_TERM_RANGE } from './tables.ts';

/** Working arrays for the passage of a storm over one site; made once, used for many sites. */
export type Passage = {
  /** Time of every state of the storm [s], shape (states,). */
  readonly timeS: Float64Array;
  /** States of the storm at which the site is looked at, ascending, shape (states,). */
  readonly state: Int32Array;
  /** Plain gust at each of them [m s⁻¹]. */
  readonly gust: Float64Array;
  /** Open-sea wind, and where it blows TO: eastward and northward part [m s⁻¹]. */
  readonly seaU: Float64Array;
  readonly seaV: Float64Array;
  /** Distance from the centre [m], its natural logarithm, and the bearing from the centre as sine and cosine [1]. */
  readonly distance: Float64Array;
  readonly logDistance: Float64Array;
  readonly sinBearing: Float64Array;
  readonly cosBearing: Float64Array;
  /** Gust over open-sea wind, and 10-min mean over open-sea wind (without hills) [1]. */
  readonly factor: Float64Array;
  readonly meanFactor: Float64Array;
  /** Gust added by a vortex crest per unit of the drawn factor [m s⁻¹]; 0 outside the layer. */
  readonly crest: Float64Array;
  /** Cosine and sine of m (azimuth - pattern angle) [1]; only where crest > 0. */
  readonly phaseCos: Float64Array;
  readonly phaseSin: Float64Array;
  /** What is known of each outer time before the wind is computed, shape (outer times,). */
  readonly mark: Uint8Array;
  /** Times at which the wind is to be computed, as indices into the series. */
  readonly wanted: Int32Array;
  /** Of each outer time: unit vector of the centre, and squared chord within which it is near, shape (outer times, 4). */
  readonly centres: Float64Array;
  /** Squared chords beyond which an outer time is quiet, shape (quiet winds, outer times) row-major. */
  readonly quietChords: Float64Array;
  /** Chosen relations of the open-sea wind and of the ground; null under the default ones. */
  readonly chosenSea: ChosenSeaWind | null;
  readonly chosenGround: ChosenGround | null;
  /** Cosine and sine of the 24 starting phases, one after the other, shape (24, 2); null where they are evenly spread. */
  readonly ownPhases: Float64Array | null;
  /** Strength factors of the draws, ascending [1], shape (11,). */
  readonly strengths: Float64Array;
};

/** A place as a unit vector. */
export type UnitPlace = { readonly x: number; readonly y: number; readonly z: number };

/**
 * Makes the working arrays for a storm.
 *
 * @param storm The storm.
 * @returns Arrays long enough for every state.
 * @source Workspace only.
 */
export function makePassage(storm: Storm): Passage {
  const n = storm.stateCount;
  const { states, outer } = storm;
  const centres = new Float64Array(4 * outer.length);
  const quietChords = new Float64Array(QUIET_WIND_COUNT * outer.length);
  outer.forEach((k, o) => {
    const at = k * STATE_SIZE;
    centres.set([states[at]!, states[at + 1]!, states[at + 2]!, states[at + STATE.nearChord2]!], 4 * o);
    for (let quiet = 0; quiet < QUIET_WIND_COUNT; quiet++) {
      quietChords[quiet * outer.length + o] = states[at + STATE.quietChord2 + quiet]!;
    }
  });
  return {
    timeS: Float64Array.from({ length: n }, (_, k) => storm.states[k * STATE_SIZE + STATE.timeS]!),
    state: new Int32Array(n),
    gust: new Float64Array(n),
    seaU: new Float64Array(n),
    seaV: new Float64Array(n),
    distance: new Float64Array(n),
    logDistance: new Float64Array(n),
    sinBearing: new Float64Array(n),
    cosBearing: new Float64Array(n),
    factor: new Float64Array(n),
    meanFactor: new Float64Array(n),
    crest: new Float64Array(n),
    phaseCos: new Float64Array(n),
    phaseSin: new Float64Array(n),
    mark: new Uint8Array(storm.outer.length),
    wanted: new Int32Array(n),
    centres,
    quietChords,
    chosenSea: chosenSeaWindOf(storm),
    chosenGround: chosenGroundOf(storm),
    ownPhases: ownPhasesOf(storm.phases),
    strengths: Float64Array.from(storm.strengths),
  };
}

function ownPhasesOf(phases: readonly number[]): Float64Array | null {
  if (phases.every((phase, j) => phase === startingPhase(j))) return null;
  return Float64Array.from(phases.flatMap((phase) => [Math.cos(phase), Math.sin(phase)]));
}

/**
 * Winds and gusts at one site at the times the chain looks at: outer times, and inner times next to outer ones at which
 * the centre is near.
 *
 * Directions come from differences of unit vectors, so there is no trigonometry and no loss of digits near the centre;
 * powers and arcs come from tables good to 1e-11.
 *
 * @param storm     The storm.
 * @param latitude  Latitude of the site [deg].
 * @param longitude Longitude of the site [deg].
 * @param exposure  Ground around the site.
 * @param passage   Receives the series.
 * @param floor     Gust [m s⁻¹]; outer times at which the gust certainly stays below it, and those before and after too,
 *                  are left out. 0 = none is.
 * @returns Number of times written.
 * @source The chain as footprint/wind-at.ts states it; the sources of each step are in winds, terrain and gust.
 */
export function followPassage(
  storm: Storm,
  latitude: number,
  longitude: number,
  exposure: Exposure,
  passage: Passage,
  floor = 0,
): number {
  const place = unitPlace(latitude, longitude);
  const { chosenGround } = passage;
  const factor = chosenGround === null ? greatestFactor(exposure) : chosenGreatestFactor(chosenGround, exposure);
  const quiet = Math.min(Math.floor(floor / factor) - FIRST_QUIET_WIND, QUIET_WIND_COUNT - 1);
  const count = layTimes(storm, place, quiet, passage);
  const { wanted } = passage;
  for (let i = 0; i < count; i++) wanted[i] = i;
  windsAt(storm, place, exposure, passage, 0, count);
  return count;
}

/**
 * Unit vector of a site.
 *
 * @param latitude  [deg]
 * @param longitude [deg]
 * @returns The vector [1].
 * @source Definition.
 */
export function unitPlace(latitude: number, longitude: number): UnitPlace {
  const phi = radians(latitude);
  const lambda = radians(longitude);
  return { x: Math.cos(phi) * Math.cos(lambda), y: Math.cos(phi) * Math.sin(lambda), z: Math.sin(phi) };
}

/**
 * Gust at a site at the outer time at which the centre is nearest: no more than the peak.
 *
 * @param storm    The storm.
 * @param place    The site.
 * @param exposure Ground around it.
 * @param passage  Working arrays; their series is lost.
 * @returns Gust [m s⁻¹].
 * @source The chain as footprint/wind-at.ts states it.
 */
export function gustWhenNearest(storm: Storm, place: UnitPlace, exposure: Exposure, passage: Passage): number {
  const { centres } = passage;
  const { x, y, z } = place;
  let nearest = 0;
  let cosine = -Infinity;
  for (let o = 0, at = 0; at < centres.length; o++, at += 4) {
    const dot = x * centres[at]! + y * centres[at + 1]! + z * centres[at + 2]!;
    if (dot > cosine) {
      cosine = dot;
      nearest = o;
    }
  }
  passage.state[0] = storm.outer[nearest]!;
  passage.wanted[0] = 0;
  windsAt(storm, place, exposure, passage, 0, 1);
  return passage.gust[0]!;
}

/**
 * Lists the times at which a storm is looked at from a site: outer times, and inner ones next to outer times at which
 * the centre is near.
 *
 * @param storm   The storm.
 * @param place   The site.
 * @param quiet   Which of the storm's quiet distances to go by: outer times beyond it, and those before and after too,
 *                are left out; negative = none is.
 * @param passage Receives the states.
 * @returns Number of times.
 * @source Times of the chain.
 */
export function layTimes(storm: Storm, place: UnitPlace, quiet: number, passage: Passage): number {
  const { outer } = storm;
  const { state, mark, centres, quietChords } = passage;
  const { x, y, z } = place;
  const last = outer.length - 1;
  const quietFrom = quiet * outer.length;
  for (let o = 0; o <= last; o++) {
    const dx = x - centres[4 * o]!;
    const dy = y - centres[4 * o + 1]!;
    const dz = z - centres[4 * o + 2]!;
    const chord2 = dx * dx + dy * dy + dz * dz;
    mark[o] = chord2 < centres[4 * o + 3]! ? NEAR : quiet >= 0 && chord2 > quietChords[quietFrom + o]! ? QUIET : FAR;
  }
  let count = 0;
  for (let o = 0; o <= last; o++) {
    const own = mark[o]!;
    const next = o === last ? QUIET : mark[o + 1]!;
    if (own === QUIET && next === QUIET && (o === 0 || mark[o - 1] === QUIET)) continue;
    const first = outer[o]!;
    state[count++] = first;
    if (own !== NEAR && next !== NEAR) continue;
    const end = o === last ? first : outer[o + 1]!;
    for (let k = first + 1; k < end; k++) state[count++] = k;
  }
  return count;
}

/**
 * Computes the wind at some of the times of a passage.
 *
 * @param storm    The storm.
 * @param place    The site.
 * @param exposure Ground around it.
 * @param passage  Holds the states and which of them are wanted; receives the series there.
 * @param from     First of the wanted times to compute.
 * @param to       One beyond the last of them.
 * @source The chain as footprint/wind-at.ts states it.
 */
export function windsAt(
  storm: Storm,
  place: UnitPlace,
  exposure: Exposure,
  passage: Passage,
  from: number,
  to: number,
): void {
  const { states, wavenumber } = storm;
  const { chosenSea, chosenGround } = passage;
  locate(states, place, passage, from, to);
  if (chosenSea === null) seaWinds(states, passage, from, to);
  else chosenSeaWinds(chosenSea, passage, from, to);
  if (chosenGround === null) gustsOver(exposure, passage, from, to);
  else chosenGusts(chosenGround, states, exposure, passage, from, to);
  crests(states, wavenumber ?? 0, passage, from, to);
}

// Marks of outer times.
const FAR = 0;
const NEAR = 1;
const QUIET = 2;

/** Bound of gust over open-sea wind: rough sea is the worst case, and the land's weight enters as a parabola. */
function greatestFactor({ isAtSea, landFactor, landTurbulence, topographicFactor }: Exposure): number {
  const overSea = 1 + PEAK * STORM_TURBULENCE;
  if (isAtSea) return overSea * topographicFactor;
  const slower = landFactor * STORM_PER_FACTOR - 1;
  const gustier = PEAK * (landTurbulence - STORM_TURBULENCE);
  const at = (weight: number): number => (1 + weight * slower) * (overSea + weight * gustier);
  // Vertex of the parabola, where it lies between sea and land.
  const vertex = -(gustier + overSea * slower) / (2 * slower * gustier);
  const inside = vertex > 0 && vertex < 1 ? at(vertex) : 0;
  return Math.max(at(0), at(1), inside) * topographicFactor;
}

const SEA_FACTOR_SLOPE = (OUTER_FACTOR - INNER_FACTOR) / (OUTER_RADIUS - INNER_RADIUS);
const COS_25 = Math.cos(radians(25));
const SIN_25 = Math.sin(radians(25));
const TERM_START = PRESSURE_TERM_RANGE[0];
const TERM_END = PRESSURE_TERM_RANGE[1];
const TERM_PER_STEP = PRESSURE_TERM.perStep;
const TERM_NODES = PRESSURE_TERM.nodes;
const TURN_PER_STEP = EIGHTH_TURN.perStep;
const TURN_NODES = EIGHTH_TURN.nodes;
const DRAG_START = DRAG_WINDS[0];
const DRAG_END = DRAG_WINDS[1];
const DRAG_PER_STEP = PER_SEA_FACTOR.perStep;
const DRAG_NODES = PER_SEA_FACTOR.nodes;
const CALM_PER_FACTOR = DRAG_NODES[0]!;
const STORM_PER_FACTOR = 1 / roughnessFactor(roughnessOfDrag(DRAG_RANGE[1]));
// 1 / ln(10 / z0) of the sea is sqrt(Cd) / 0.4.
const CALM_TURBULENCE = 2.5 * Math.sqrt(DRAG_RANGE[0]);
const STORM_TURBULENCE = 2.5 * Math.sqrt(DRAG_RANGE[1]);
// The radial shape is straight between tenths of the radius of maximum wind.
const SHAPE = Float64Array.from({ length: 22 }, (_, k) => radialShape(k / 10));
const DRAG_FLOOR = DRAG_LINE[0];
const DRAG_SLOPE = DRAG_LINE[1];
const PEAK = PEAK_FACTOR;

// Each step is a loop of its own: the processor then works on several times at once.

/** Distance from the centre, bearing from it, and natural logarithm of the distance. */
function locate(states: Float64Array, place: UnitPlace, passage: Passage, from: number, to: number): void {
  const { state, wanted, distance, logDistance, sinBearing, cosBearing } = passage;
  const { x: px, y: py, z: pz } = place;
  for (let k = from; k < to; k++) {
    const i = wanted[k]!;
    const at = state[i]! * STATE_SIZE;
    const dx = px - states[at]!;
    const dy = py - states[at + 1]!;
    const dz = pz - states[at + 2]!;
    const east = dx * states[at + 3]! + dy * states[at + 4]!;
    const north = dx * states[at + 5]! + dy * states[at + 6]! + dz * states[at + 7]!;
    const chord2 = dx * dx + dy * dy + dz * dz;
    const chord = Math.sqrt(chord2);
    // Arc of a chord: 2 asin(chord / 2), by its series where that is exact to rounding.
    const arc =
      chord2 < 0.04
        ? chord *
          (1 +
            chord2 *
              (1 / 24 +
                chord2 *
                  (3 / 640 +
                    chord2 *
                      (5 / 7168 + chord2 * (35 / 294912 + chord2 * (63 / 2883584 + chord2 * (231 / 54525952)))))))
        : 2 * Math.asin(Math.min(chord / 2, 1));
    const tangent = Math.sqrt(east * east + north * north);
    // At the very centre, and at its antipode, the bearing is taken as north.
    const perTangent = tangent > 0 ? 1 / tangent : 0;
    sinBearing[i] = east * perTangent;
    cosBearing[i] = tangent > 0 ? north * perTangent : 1;
    let r = EARTH_RADIUS * arc;
    if (r < 1) r = 1;
    distance[i] = r;
    logDistance[i] = quickLog(r);
  }
}

/** Wind over the open sea. */
function seaWinds(states: Float64Array, passage: Passage, from: number, to: number): void {
  const { state, wanted, distance, logDistance, sinBearing, cosBearing, seaU, seaV } = passage;
  for (let k = from; k < to; k++) {
    const i = wanted[k]!;
    const at = state[i]! * STATE_SIZE;
    const r = distance[i]!;
    const y = states[at + 9]! * (states[at + 8]! - logDistance[i]!);
    let term: number;
    if (y > TERM_START && y < TERM_END) {
      const place = (y - TERM_START) * TERM_PER_STEP;
      const node = place | 0;
      const s = place - node;
      const a = TERM_NODES[2 * node]!;
      const b = TERM_NODES[2 * node + 1]!;
      const rise = TERM_NODES[2 * node + 2]! - a;
      const excess = b + TERM_NODES[2 * node + 3]! - 2 * rise;
      term = a + s * (b + s * (rise - b - excess + s * excess));
    } else {
      term = y < 0 ? Math.exp(y - Math.exp(y)) : 0;
    }
    const half = states[at + 11]! * r;
    const gradient = Math.sqrt(states[at + 10]! * term + half * half) - half;
    const reduction =
      r <= INNER_RADIUS
        ? INNER_FACTOR
        : r >= OUTER_RADIUS
          ? OUTER_FACTOR
          : INNER_FACTOR + (r - INNER_RADIUS) * SEA_FACTOR_SLOPE;
    const surface = reduction * gradient;
    const x = r * states[at + 15]!;
    let cosInflow = COS_25;
    let sinInflow = SIN_25;
    if (x < 1.2) {
      const angle = (x < 1 ? 10 + 10 * x : 25 * x - 5) * (Math.PI / 180);
      const a2 = angle * angle;
      sinInflow = angle * (1 - a2 * (1 / 6 - a2 * (1 / 120 - a2 * (1 / 5040 - a2 * (1 / 362880 - a2 / 39916800)))));
      cosInflow =
        1 - a2 * (1 / 2 - a2 * (1 / 24 - a2 * (1 / 720 - a2 * (1 / 40320 - a2 * (1 / 3628800 - a2 / 479001600)))));
    }
    const sign = states[at + 12]!;
    const sine = sinBearing[i]!;
    const cosine = cosBearing[i]!;
    // Vortex wind blows TOWARDS bearing - sign (90 + inflow).
    seaU[i] = surface * (-sign * cosine * cosInflow - sine * sinInflow) + states[at + 13]!;
    seaV[i] = surface * (sign * sine * cosInflow - cosine * sinInflow) + states[at + 14]!;
  }
}

/** Gust and its factor at the site. */
function gustsOver(exposure: Exposure, passage: Passage, from: number, to: number): void {
  const { wanted, gust, seaU, seaV, factor, meanFactor } = passage;
  const { isAtSea, isUniform, weights, landFactor, landTurbulence, topographicFactor } = exposure;
  const uniformWeight = weights[0]!;
  for (let k = from; k < to; k++) {
    const i = wanted[k]!;
    const u = seaU[i]!;
    const v = seaV[i]!;
    const wind = Math.sqrt(u * u + v * v);
    let perSea: number;
    let seaTurbulence: number;
    if (wind >= DRAG_END) {
      perSea = STORM_PER_FACTOR;
      seaTurbulence = STORM_TURBULENCE;
    } else if (wind <= DRAG_START) {
      perSea = CALM_PER_FACTOR;
      seaTurbulence = CALM_TURBULENCE;
    } else {
      seaTurbulence = 2.5 * Math.sqrt(DRAG_FLOOR + DRAG_SLOPE * wind);
      const place = (wind - DRAG_START) * DRAG_PER_STEP;
      const node = place | 0;
      const s = place - node;
      const a = DRAG_NODES[2 * node]!;
      const b = DRAG_NODES[2 * node + 1]!;
      const rise = DRAG_NODES[2 * node + 2]! - a;
      const excess = b + DRAG_NODES[2 * node + 3]! - 2 * rise;
      perSea = a + s * (b + s * (rise - b - excess + s * excess));
    }
    let mean = 1;
    let turbulence = seaTurbulence;
    if (!isAtSea) {
      let weight = uniformWeight;
      if (!isUniform) {
        // Direction the wind comes FROM, in eighths of a turn: octant and share by symmetry, arc from the table.
        const fromEast = -u;
        const fromNorth = -v;
        const absEast = fromEast < 0 ? -fromEast : fromEast;
        const absNorth = fromNorth < 0 ? -fromNorth : fromNorth;
        const steep = absEast > absNorth;
        const greater = steep ? absEast : absNorth;
        const ratio = greater > 0 ? (steep ? absNorth : absEast) / greater : 0;
        const place = ratio * TURN_PER_STEP;
        const node = place | 0;
        const s = place - node;
        const a = TURN_NODES[2 * node]!;
        const b = TURN_NODES[2 * node + 1]!;
        const rise = TURN_NODES[2 * node + 2]! - a;
        const excess = b + TURN_NODES[2 * node + 3]! - 2 * rise;
        let eighths = a + s * (b + s * (rise - b - excess + s * excess));
        if (steep) eighths = 2 - eighths;
        if (fromNorth < 0) eighths = 4 - eighths;
        if (fromEast < 0) eighths = 8 - eighths;
        const sector = eighths | 0;
        const share = eighths - sector;
        weight = weights[sector & 7]! * (1 - share) + weights[(sector + 1) & 7]! * share;
      }
      mean = 1 + weight * (landFactor * perSea - 1);
      turbulence = seaTurbulence + weight * (landTurbulence - seaTurbulence);
    }
    const toGust = mean * (1 + PEAK * turbulence) * topographicFactor;
    gust[i] = wind * toGust;
    factor[i] = toGust;
    meanFactor[i] = mean;
  }
}

/** Gust a vortex crest adds, and the phase of the pattern. */
function crests(states: Float64Array, wavenumber: number, passage: Passage, from: number, to: number): void {
  const { state, wanted, distance, sinBearing, cosBearing, factor, crest, phaseCos, phaseSin } = passage;
  for (let k = from; k < to; k++) {
    const i = wanted[k]!;
    const at = state[i]! * STATE_SIZE;
    const x = distance[i]! * states[at + 15]!;
    const vortexWind = states[at + 16]!;
    if (!(x < 2 && vortexWind > 0)) {
      crest[i] = 0;
      continue;
    }
    const tenth = 10 * x;
    const cell = tenth | 0;
    const inner = SHAPE[cell]!;
    crest[i] = factor[i]! * vortexWind * (inner + (tenth - cell) * (SHAPE[cell + 1]! - inner));
    // Azimuth positive in the cyclonic sense; m times it by repeated turning.
    const c = sinBearing[i]!;
    const d = states[at + 12]! * cosBearing[i]!;
    let re = c;
    let im = d;
    for (let m = 1; m < wavenumber; m++) {
      const next = re * c - im * d;
      im = re * d + im * c;
      re = next;
    }
    const turnCos = states[at + 17]!;
    const turnSin = states[at + 18]!;
    phaseCos[i] = re * turnCos + im * turnSin;
    phaseSin[i] = im * turnCos - re * turnSin;
  }
}
