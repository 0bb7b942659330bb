import { EARTH_RADIUS } from '../constants.ts';
import { radialShape, VORTEX_REACH } from '../ring/draws.ts';
import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { makeSeaWindSteps, type FieldState, type SeaWind, type SeaWindSteps } from '../winds/field-state.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import type { Exposure } from './exposure.ts';
import { groundOf, makeGroundSteps, type Ground, type GroundSteps } from './ground.ts';
import type { Passage, UnitPlace } from './passage.ts';

/** The chosen relations of a storm, ready to be followed over sites. */
export type ChosenField = {
  readonly field: readonly FieldState[];
  readonly seaWind: SeaWind;
  readonly ground: Ground;
  /** Gust over open-sea wind that is not exceeded while that wind is in 2..21 m/s [1]. */
  readonly greatestFactor: (exposure: Exposure) => number;
  readonly sea: SeaWindSteps;
  readonly land: GroundSteps;
};

/**
 * Puts the chosen relations of a storm together.
 *
 * @param storm The storm.
 * @returns The relations and their working space; null under the default field, which has a kernel of its own.
 * @source Arrangement only.
 */
export function chosenFieldOf({ field, options }: Storm): ChosenField | null {
  if (field === null) return null;
  const ground = groundOf(options);
  const f = field.map((state) => state.f);
  const ends = [f.reduce((a, b) => Math.min(a, b)), f.reduce((a, b) => Math.max(a, b))];
  return {
    field,
    seaWind: seaWindOf(options),
    ground,
    greatestFactor: (exposure) => Math.max(...ends.map((end) => ground.greatestFactor(exposure, end))),
    sea: makeSeaWindSteps(),
    land: makeGroundSteps(),
  };
}

/**
 * Winds and gusts at one site at some of the times of a passage, under a chosen wind field.
 *
 * @param storm    The storm.
 * @param chosen   Its relations.
 * @param place    The site.
 * @param exposure Ground around the site.
 * @param passage  Holds the states and which of them are wanted; receives the series there.
 * @param from     First of the wanted times to compute.
 * @param to       One beyond the last of them.
 * @source The formulas of footprint/wind-at.ts, directions and distances from differences of unit vectors.
 */
export function evaluateChosen(
  { states, wavenumber }: Storm,
  { field, seaWind, ground, sea, land }: ChosenField,
  place: UnitPlace,
  exposure: Exposure,
  passage: Passage,
  from: number,
  to: number,
): void {
  for (let n = from; n < to; n++) {
    const i = passage.wanted[n]!;
    const k = passage.state[i]!;
    const at = k * STATE_SIZE;
    const state = field[k]!;
    const dx = place.x - states[at + STATE.x]!;
    const dy = place.y - states[at + STATE.y]!;
    const dz = place.z - states[at + STATE.z]!;
    const east = dx * states[at + STATE.eastX]! + dy * states[at + STATE.eastY]!;
    const north = dx * states[at + STATE.northX]! + dy * states[at + STATE.northY]! + dz * states[at + STATE.northZ]!;
    const chord = Math.sqrt(dx * dx + dy * dy + dz * dz);
    const r = Math.max(2 * EARTH_RADIUS * Math.asin(Math.min(chord / 2, 1)), 1);
    const tangent = Math.sqrt(east * east + north * north);
    // At the very centre, and at its antipode, the bearing is taken as north.
    const sinBearing = tangent > 0 ? east / tangent : 0;
    const cosBearing = tangent > 0 ? north / tangent : 1;
    seaWind.write(state, r, sinBearing, cosBearing, sea);
    ground.write(exposure, sea.eastward, sea.northward, state.f, land);
    const { eastward, northward } = sea;
    const factor = land.terrainFactor * land.gustFactor * exposure.topographicFactor;
    passage.gust[i] = Math.sqrt(eastward * eastward + northward * northward) * factor;
    passage.seaU[i] = eastward;
    passage.seaV[i] = northward;
    passage.factor[i] = factor;
    passage.meanFactor[i] = land.terrainFactor;
    const vortexWind = states[at + STATE.vortexWind]!;
    const x = r / state.rMax;
    if (wavenumber === null || !(vortexWind > 0) || !(x < VORTEX_REACH)) {
      passage.crest[i] = 0;
      continue;
    }
    passage.crest[i] = factor * vortexWind * radialShape(x);
    // Azimuth positive in the cyclonic sense: phi = sign (90 degrees - bearing); the pattern has turned by the same sense.
    const phase = wavenumber * (Math.atan2(state.sign * cosBearing, sinBearing) - states[at + STATE.patternAngle]!);
    passage.phaseCos[i] = Math.cos(phase);
    passage.phaseSin[i] = Math.sin(phase);
  }
}
