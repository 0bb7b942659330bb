import { usesDefaultGround } from '../track/options.ts';
import { STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { makeSeaWindSteps, type FieldState, type SeaWind } from '../winds/field-state.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import type { Exposure } from './exposure.ts';
import { groundOf, makeGroundSteps, type Ground } from './ground.ts';
import type { Passage } from './passage.ts';

/** The open-sea wind by chosen relations. */
export type ChosenSeaWind = SeaWind & { readonly field: readonly FieldState[] };

/** The ground by chosen relations. */
export type ChosenGround = Ground & {
  /** Least and greatest Coriolis parameter of the storm [s⁻¹]. */
  readonly turning: readonly [number, number];
};

/**
 * The chosen open-sea wind of a storm.
 *
 * @param storm The storm.
 * @returns The wind; null under the default relations, which have a kernel of their own.
 * @source Arrangement only.
 */
export function chosenSeaWindOf({ field, options }: Storm): ChosenSeaWind | null {
  return field === null ? null : { ...seaWindOf(options), field };
}

/**
 * The chosen ground of a storm.
 *
 * @param storm The storm.
 * @returns The ground; null under the default relations, which have a kernel of their own.
 * @source Arrangement only.
 */
export function chosenGroundOf({ states, outer, options }: Storm): ChosenGround | null {
  if (usesDefaultGround(options)) return null;
  const turning: [number, number] = [Infinity, 0];
  for (const k of outer) {
    const f = 2 * states[k * STATE_SIZE + STATE.halfF]!;
    turning[0] = Math.min(turning[0], f);
    turning[1] = Math.max(turning[1], f);
  }
  return { ...groundOf(options), turning };
}

/**
 * Bound of gust over open-sea wind at a site under chosen ground, while that wind is in 2..21 m/s.
 *
 * @param ground   The ground.
 * @param exposure Ground around the site.
 * @returns Factor [1].
 * @source Greatest of the bounds at both ends of the Coriolis parameter, in which it is monotonous.
 */
export function chosenGreatestFactor({ greatestFactor, turning }: ChosenGround, exposure: Exposure): number {
  return Math.max(greatestFactor(exposure, turning[0]), greatestFactor(exposure, turning[1]));
}

/**
 * Wind over open sea at some of the times of a passage, by chosen relations.
 *
 * @param chosen  The relations.
 * @param passage Holds the states, which of them are wanted, and where the site lies; receives the wind there.
 * @param from    First of the wanted times to compute.
 * @param to      One beyond the last of them.
 * @source winds/sea-wind.ts.
 */
export function chosenSeaWinds({ field, write }: ChosenSeaWind, passage: Passage, from: number, to: number): void {
  const { state, wanted, distance, sinBearing, cosBearing, seaU, seaV } = passage;
  const out = makeSeaWindSteps();
  for (let n = from; n < to; n++) {
    const i = wanted[n]!;
    write(field[state[i]!]!, distance[i]!, sinBearing[i]!, cosBearing[i]!, out);
    seaU[i] = out.eastward;
    seaV[i] = out.northward;
  }
}

/**
 * Gust and its factors at some of the times of a passage, by chosen relations.
 *
 * @param chosen   The relations.
 * @param states   States of the storm.
 * @param exposure Ground around the site.
 * @param passage  Holds the wind over open sea; receives the gust.
 * @param from     First of the wanted times to compute.
 * @param to       One beyond the last of them.
 * @source footprint/ground.ts.
 */
export function chosenGusts(
  { write }: ChosenGround,
  states: Float64Array,
  exposure: Exposure,
  passage: Passage,
  from: number,
  to: number,
): void {
  const { state, wanted, seaU, seaV, gust, factor, meanFactor } = passage;
  const out = makeGroundSteps();
  for (let n = from; n < to; n++) {
    const i = wanted[n]!;
    const u = seaU[i]!;
    const v = seaV[i]!;
    write(exposure, u, v, 2 * states[state[i]! * STATE_SIZE + STATE.halfF]!, out);
    const toGust = out.terrainFactor * out.gustFactor * exposure.topographicFactor;
    gust[i] = Math.sqrt(u * u + v * v) * toGust;
    factor[i] = toGust;
    meanFactor[i] = out.terrainFactor;
  }
}
