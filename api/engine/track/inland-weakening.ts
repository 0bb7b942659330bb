import { LEAST_PRESSURE_DEFICIT } from '../constants.ts';
import type { InlandSpell } from '../geo/land.ts';
import { coriolis } from '../winds/coriolis.ts';
import { hollandGradientWind } from '../winds/holland-1980.ts';
import { surfaceShare } from '../winds/implied-wind.ts';
import { kaplanDeMariaWind, seaEquivalent, vickeryDeficit, type FillingRegion } from '../winds/inland-decay.ts';
import { fitVortex, strongestWind } from '../winds/vortex-fit.ts';
import type { TrackFix } from './fixes.ts';
import type { IntensityFix } from './intensity.ts';
import type { ChainOptions } from './options.ts';

/** Intensity that a relation gives in the place of the track's own. */
export type WeakenedIntensity = {
  /** Maximum 1-min wind as over open sea [m s⁻¹]. */
  readonly maxWind: number;
  /** Pressure deficit [Pa]; null = as the track gives it. */
  readonly deficit: number | null;
  readonly relation: string;
};

/** The intensity at a time [s]; null as long as the track's own holds. */
export type Weakening = (timeS: number) => WeakenedIntensity | null;

/**
 * Weakening over land in the place of the intensities a track gives after landfall.
 *
 * From the last fix before the centre first crosses from sea onto land, the intensity of that fix is held up to the coast;
 * over land it weakens by the relation; over water again it is held as it left the land, and weakens on from there at the
 * next coast. A spell over land that begins with the track has no landfall and is left as given.
 *
 * Kaplan & DeMaria give the wind over land; it is divided by their 0.9 at the coast, because the ground is taken account of
 * afterwards. The pressure stays the track's. Vickery gives the pressure deficit; the shape B stays that of landfall and
 * the wind follows.
 *
 * @param fixes   Fixes as given.
 * @param settled The same fixes with their intensity settled.
 * @param spells  Times over land, in order.
 * @param options Decay, and what the match of the maximum rests on.
 * @returns The intensity as a function of time; null where nothing is to be replaced.
 * @source Kaplan & DeMaria (1995, 2001); Vickery (2005).
 */
export function weakeningOf(
  fixes: readonly TrackFix[],
  settled: readonly IntensityFix[],
  spells: readonly InlandSpell[],
  options: ChainOptions,
): Weakening | null {
  const { decay } = options;
  const landfalls = spells.filter(({ enterS }) => enterS > fixes[0]!.timeS);
  if (decay === 'as-given' || landfalls.length === 0) return null;
  const last = fixes.findLastIndex(({ timeS }) => timeS <= landfalls[0]!.enterS);
  const coast = { latitude: fixes[last]!.latitude, ...settled[last]! };
  const lawOf =
    decay === 'kaplan-demaria'
      ? windLaw(coast.latitude)
      : fillingLaw(coast, decay.slice('vickery-'.length) as FillingRegion, options);
  type Reach = { readonly spell: InlandSpell; readonly law: Law };
  const reaches: Reach[] = [];
  let start: Start = { maxWind: coast.maxWind, deficit: null };
  for (const spell of landfalls) {
    const law = lawOf(start);
    reaches.push({ spell, law });
    start = law((spell.leaveS - spell.enterS) / 3600);
  }
  const relation = decay === 'kaplan-demaria' ? 'Kaplan & DeMaria (1995, 2001)' : 'Vickery (2005)';
  return (timeS) => {
    if (timeS < fixes[last]!.timeS) return null;
    const reach = reaches.findLast(({ spell }) => spell.enterS <= timeS) ?? reaches[0]!;
    const until = Math.min(timeS, reach.spell.leaveS);
    return { ...reach.law(Math.max(until - reach.spell.enterS, 0) / 3600), relation };
  };
}

type Start = { readonly maxWind: number; readonly deficit: number | null };
/** Intensity some hours after landfall. */
type Law = (hours: number) => Start;

function windLaw(latitude: number): (start: Start) => Law {
  return ({ maxWind }) =>
    (hours) => ({ maxWind: seaEquivalent(kaplanDeMariaWind(maxWind, hours, latitude)), deficit: null });
}

function fillingLaw(
  coast: IntensityFix & { readonly latitude: number },
  region: FillingRegion,
  options: ChainOptions,
): (start: Start) => Law {
  const { speed, rMax, maxWind } = coast;
  const f = coriolis(coast.latitude);
  const share = surfaceShare(coast.source === 'pressure', options);
  const own = Math.max(coast.ambientPressure - coast.centralPressure, LEAST_PRESSURE_DEFICIT);
  const vortex = fitVortex(maxWind, speed, rMax, f, own, options, share);
  return ({ deficit: left }) =>
    (hours) => {
      const deficit = Math.max(
        vickeryDeficit(left ?? vortex.deficit, hours, speed, rMax, region),
        LEAST_PRESSURE_DEFICIT,
      );
      const gradient = hollandGradientWind(rMax, { ...vortex, deficit });
      return { maxWind: strongestWind(gradient, speed, rMax, f, options, share), deficit };
    };
}
