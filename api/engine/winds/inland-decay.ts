import { DomainError } from '../errors.ts';
import { MS_PER_KNOT, PA_PER_HPA } from '../units.ts';

/** Wind just after the centre has crossed the coast over that before [1]: the step onto rough ground. */
export const LANDFALL_REDUCTION = 0.9;

const METRES_PER_KM = 1000;
/** Latitudes up to which the southern and from which the northern curve holds [deg]. */
const BLEND_LATITUDES = [36, 40] as const;
/** Hours after which the distance term is zero, and beyond which it isn't used [h]. From memory, and the least certain. */
const DISTANCE_HOURS = 50;

/** A decay curve: background wind [m s⁻¹] and rate [h⁻¹]. */
type Curve = { readonly background: number; readonly rate: number };
/** Kaplan & DeMaria (1995), south of 37 N. */
const SOUTHERN: Curve = { background: 26.7 * MS_PER_KNOT, rate: 0.095 };
/** Kaplan & DeMaria (2001), New England. */
const NORTHERN: Curve = { background: 29.6 * MS_PER_KNOT, rate: 0.187 };

/** Coasts for which there is a filling rate. */
export type FillingRegion = 'gulf' | 'florida' | 'mid-atlantic' | 'new-england';

/** Filling rate: constant [h⁻¹] and slope with deficit times speed over radius [h⁻¹ per hPa (m/s) / km]. */
const FILLING: Record<FillingRegion, readonly [number, number]> = {
  gulf: [0.0413, 0.0018],
  florida: [0.0225, 0.0017],
  'mid-atlantic': [0.0364, 0.0016],
  'new-england': [0.0034, 0.001],
};

/**
 * Maximum 1-min wind of a cyclone over land, on the ground as it is there. Terrain laid on top counts the coast's step twice:
 * give it `seaEquivalent` of this instead.
 *
 * @param landfallWind Maximum 1-min wind when the centre crosses the coast [m s⁻¹], ≥ 0.
 * @param hours        Time since then [h], ≥ 0.
 * @param latitude     Latitude of the centre [deg]: the southern curve up to 36, the northern from 40, between them linear in
 *                     their results.
 * @param coastDistance Distance of the centre from the coast [m]; null leaves out the distance term, which belongs to the
 *                     southern curve. Below 1 km taken as 1 km.
 * @returns Maximum 1-min wind [m s⁻¹], ≥ 0.
 * @throws {DomainError} when a wind, time or distance is negative.
 * @source Kaplan & DeMaria (1995), J. Appl. Meteor. 34, 2499–2512, and (2001), J. Appl. Meteor. 40, 280–286; constants from
 *         memory. A storm already below the background wind stays as it is, and none gains from the distance term: product rule.
 */
export function kaplanDeMariaWind(
  landfallWind: number,
  hours: number,
  latitude: number,
  coastDistance: number | null = null,
): number {
  if (!(landfallWind >= 0)) throw new DomainError('landfall wind', landfallWind, '≥ 0 m/s');
  if (!(hours >= 0)) throw new DomainError('hours', hours, '≥ 0 h');
  const start = LANDFALL_REDUCTION * landfallWind;
  const [south, north] = BLEND_LATITUDES;
  const share = Math.min(Math.max((Math.abs(latitude) - south) / (north - south), 0), 1);
  const southern = Math.min(decayed(start, hours, SOUTHERN) - distanceTerm(hours, coastDistance), start);
  return Math.max(0, (1 - share) * southern + share * decayed(start, hours, NORTHERN));
}

/**
 * Wind that the cyclone would have over open sea, from its wind over land.
 *
 * @param inlandWind Maximum 1-min wind over land [m s⁻¹].
 * @returns Maximum 1-min wind over open sea [m s⁻¹].
 * @source Kaplan & DeMaria (1995), J. Appl. Meteor. 34, 2499–2512: one over the reduction at the coast.
 */
export function seaEquivalent(inlandWind: number): number {
  return inlandWind / LANDFALL_REDUCTION;
}

/**
 * Pressure deficit of a cyclone that fills over land. It fills more slowly than the wind of `kaplanDeMariaWind` falls.
 *
 * @param landfallDeficit Ambient less central pressure when the centre crosses the coast [Pa], ≥ 0.
 * @param hours           Time since then [h], ≥ 0.
 * @param speed           Translation speed at landfall [m s⁻¹], ≥ 0.
 * @param rMax            Radius of maximum wind at landfall [m], > 0.
 * @param region          Coast that was crossed.
 * @returns Deficit [Pa].
 * @throws {DomainError} when a parameter is outside its range.
 * @source Vickery (2005), J. Appl. Meteor. 44, 1807–1826; constants from memory. Spread of the rate 0.017, 0.016, 0.016 and
 *         0.011 per hour on the four coasts.
 */
export function vickeryDeficit(
  landfallDeficit: number,
  hours: number,
  speed: number,
  rMax: number,
  region: FillingRegion,
): number {
  if (!(landfallDeficit >= 0)) throw new DomainError('landfall deficit', landfallDeficit, '≥ 0 Pa');
  if (!(hours >= 0)) throw new DomainError('hours', hours, '≥ 0 h');
  if (!(speed >= 0)) throw new DomainError('speed', speed, '≥ 0 m/s');
  if (!(rMax > 0)) throw new DomainError('rMax', rMax, '> 0 m');
  const [constant, slope] = FILLING[region];
  const rate = constant + (slope * (landfallDeficit / PA_PER_HPA) * speed) / (rMax / METRES_PER_KM);
  return landfallDeficit * Math.exp(-rate * hours);
}

function decayed(start: number, hours: number, { background, rate }: Curve): number {
  return start <= background ? start : background + (start - background) * Math.exp(-rate * hours);
}

function distanceTerm(hours: number, coastDistance: number | null): number {
  if (coastDistance === null || hours >= DISTANCE_HOURS) return 0;
  if (!(coastDistance >= 0)) throw new DomainError('distance from the coast', coastDistance, '≥ 0 m');
  const km = Math.max(coastDistance / METRES_PER_KM, 1);
  return (0.0109 * Math.log(km) - 0.0503) * hours * (DISTANCE_HOURS - hours) * MS_PER_KNOT;
}
