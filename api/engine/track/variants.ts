import { STANDARD_AMBIENT_PRESSURE } from '../constants.ts';
import { DomainError } from '../errors.ts';
import { destination, greatCircleDistance, initialBearing, normalisedBearing, type Place } from '../geo/geodesy.ts';
import { seededRandom } from '../numerics/seeded-random.ts';
import { degrees, radians } from '../units.ts';
import { requireTrack, type QuadrantRadii, type TrackFix } from './fixes.ts';

/** How a track is changed. */
export type TrackChange = {
  /** Sideways, to the right of the motion when positive [km]. */
  readonly offsetKm: number;
  /** Turn of the whole track about its first fix, clockwise when positive [deg]. */
  readonly headingDeg: number;
  /** Times the maximum wind; the pressure deficit moves with its square [1]. */
  readonly windFactor: number;
  /** Times the forward speed [1]. */
  readonly speedFactor: number;
  /** Times the radius of maximum wind and every wind radius [1]. */
  readonly radiusFactor: number;
};

/** The change that changes nothing. */
export const NO_CHANGE: TrackChange = { offsetKm: 0, headingDeg: 0, windFactor: 1, speedFactor: 1, radiusFactor: 1 };

/** Least and greatest of each part of a change. Product rule. */
export const CHANGE_BOUNDS: Readonly<Record<keyof TrackChange, readonly [number, number]>> = {
  offsetKm: [-500, 500],
  headingDeg: [-60, 60],
  windFactor: [0.5, 1.5],
  speedFactor: [0.4, 2.5],
  radiusFactor: [0.4, 2.5],
};

/** Spread of an ensemble: one standard deviation of each part; of the natural logarithm of each factor. */
export type EnsembleSpread = {
  readonly offsetKm: number;
  readonly headingDeg: number;
  readonly windLog: number;
  readonly speedLog: number;
  readonly radiusLog: number;
};

/** Fixes nearer to each other than this have no bearing between them [m]. */
const STANDING = 1;

/**
 * A track moved sideways, turned, strengthened, hastened or widened.
 *
 * The track is turned about its first fix, then moved sideways: each fix goes along the great circle at a right angle to
 * the direction of travel there (`travelBearings`), to the right when the offset is positive, in either hemisphere. A fix
 * is exactly the offset away from its original; where the track turns by an angle t at a fix, the legs run
 * offset × cos(t / 2) away from the old ones. Wind and pressure move together, so that the shape of the wind profile
 * stays: the maximum wind times k, the deficit below the pressure outside times k². What isn’t given stays not given.
 * Hours inland that the track states belong to its own path: they go with the speed, and are dropped where the path moves,
 * so that the land polygons tell.
 *
 * @param fixes  Fixes as given.
 * @param change What to change; parts at 0 (offset, turn) or 1 (factors) leave their values as they are, bit for bit.
 * @returns Fixes as given, times from the same first time on.
 * @throws {DomainError} when the track can’t be used or a part of the change is out of its bounds.
 * @source Spherical trigonometry; maximum wind over the root of the deficit is steady at a given shape (Holland 1980).
 */
export function changedTrack(fixes: readonly TrackFix[], change: TrackChange): TrackFix[] {
  requireTrack(fixes);
  requireChange(change);
  const { offsetKm, headingDeg, windFactor, speedFactor, radiusFactor } = change;
  const turned = headingDeg === 0 ? fixes.map(placeOf) : fixes.map((fix) => turnedAbout(fixes[0]!, fix, headingDeg));
  const bearings = offsetKm === 0 ? [] : travelBearings(turned);
  const isMoved = headingDeg !== 0 || offsetKm !== 0;
  return fixes.map((fix, i) => ({
    ...fix,
    ...(offsetKm === 0 ? turned[i]! : destination(turned[i]!, bearings[i]! + 90, 1000 * offsetKm)),
    timeS: speedFactor === 1 ? fix.timeS : fixes[0]!.timeS + (fix.timeS - fixes[0]!.timeS) / speedFactor,
    centralPressurePa: windFactor === 1 ? fix.centralPressurePa : deepened(fix, windFactor ** 2),
    maxWindMs: fix.maxWindMs === null ? null : fix.maxWindMs * windFactor,
    radiusOfMaxWindM: fix.radiusOfMaxWindM === null ? null : fix.radiusOfMaxWindM * radiusFactor,
    radius34KtM: widened(fix.radius34KtM, radiusFactor),
    radius50KtM: widened(fix.radius50KtM, radiusFactor),
    radius64KtM: widened(fix.radius64KtM, radiusFactor),
    hoursInland: isMoved || fix.hoursInland === null ? null : fix.hoursInland / speedFactor,
  }));
}

/**
 * Direction of travel at each fix: half-way between the bearings of the leg that arrives and the leg that departs.
 *
 * Half-way, and not the motion over an hour, so that both legs lie the same distance from their offset, whatever their
 * speeds. A fix where the centre stands takes the bearings of the nearest legs that move.
 *
 * @param places At least two places in order of time [deg].
 * @returns Bearings TOWARDS which the centre travels [deg]; 0 throughout when it never moves. Where the track turns back on
 *          itself, that of the leg that departs.
 * @source Definition.
 */
export function travelBearings(places: readonly Place[]): number[] {
  const legs = legBearings(places);
  return places.map((_, i) => {
    const arrives = legs.findLast((leg) => leg.to <= i)?.atEnd;
    const departs = legs.find((leg) => leg.from >= i)?.atStart;
    if (arrives === undefined || departs === undefined) return arrives ?? departs ?? 0;
    const turn = turnBetween(arrives, departs);
    return Math.abs(turn) > 179.999 ? departs : normalisedBearing(arrives + turn / 2);
  });
}

/**
 * Where a track turns most.
 *
 * @param places At least two places in order of time [deg].
 * @returns Index of the fix and the turn there, 0..180 [deg].
 * @source Definition.
 */
export function sharpestTurn(places: readonly Place[]): { readonly fix: number; readonly turnDeg: number } {
  const legs = legBearings(places);
  let sharpest = { fix: 0, turnDeg: 0 };
  for (let k = 1; k < legs.length; k++) {
    const turnDeg = Math.abs(turnBetween(legs[k - 1]!.atEnd, legs[k]!.atStart));
    if (turnDeg > sharpest.turnDeg) sharpest = { fix: legs[k]!.from, turnDeg };
  }
  return sharpest;
}

/**
 * Changes of an ensemble around a track, from a seed.
 *
 * Members come in pairs, the second mirrored: what turns one to the right turns the other to the left. Every member takes
 * five normal numbers, whatever the spread, so that a spread of one part doesn’t alter another and the first members stay
 * when more are asked for. Changes are rounded (0.1 km, 0.1 degree, 0.001) and kept within CHANGE_BOUNDS.
 *
 * @param seed    Whole number in 0..2^32 - 1.
 * @param members How many.
 * @param spread  Standard deviations: offset [km], turn [deg], and of the natural logarithms of the factors [1].
 * @returns One change a member; the same seed gives the same changes bit for bit.
 * @throws {DomainError} when the seed or a standard deviation is out of range.
 * @source seededRandom; antithetic pairs after Hammersley & Morton (1956). A chosen spread: not fitted to forecast errors.
 */
export function ensembleChanges(seed: number, members: number, spread: EnsembleSpread): TrackChange[] {
  for (const [part, deviation] of Object.entries(spread)) {
    if (!(deviation >= 0 && deviation < Infinity)) throw new DomainError(`spread ${part}`, deviation, '0 or more');
  }
  const random = seededRandom(seed);
  const changes: TrackChange[] = [];
  while (changes.length < members) {
    const [offset, heading, wind, speed, radius] = [1, 2, 3, 4, 5].map(() => random.normal());
    for (const side of [1, -1]) {
      changes.push({
        offsetKm: within('offsetKm', rounded(side * offset! * spread.offsetKm, 10)),
        headingDeg: within('headingDeg', rounded(side * heading! * spread.headingDeg, 10)),
        windFactor: within('windFactor', rounded(Math.exp(side * wind! * spread.windLog), 1000)),
        speedFactor: within('speedFactor', rounded(Math.exp(side * speed! * spread.speedLog), 1000)),
        radiusFactor: within('radiusFactor', rounded(Math.exp(side * radius! * spread.radiusLog), 1000)),
      });
    }
  }
  return changes.slice(0, members);
}

function requireChange(change: TrackChange): void {
  for (const [part, [least, most]] of Object.entries(CHANGE_BOUNDS)) {
    const value = change[part as keyof TrackChange];
    if (!(value >= least && value <= most)) throw new DomainError(part, value, `in ${least} to ${most}`);
  }
}

function placeOf({ latitude, longitude }: Place): Place {
  return { latitude, longitude };
}

function turnedAbout(centre: Place, place: Place, angleDeg: number): Place {
  const distance = greatCircleDistance(centre, place);
  if (distance < STANDING) return placeOf(place);
  return destination(centre, initialBearing(centre, place) + angleDeg, distance);
}

/** Central pressure with a deficit times the factor; a pressure at or above the one outside stays. */
function deepened({ centralPressurePa, ambientPressurePa }: TrackFix, factor: number): number | null {
  if (centralPressurePa === null) return null;
  const outside = ambientPressurePa ?? STANDARD_AMBIENT_PRESSURE;
  return centralPressurePa >= outside ? centralPressurePa : outside - factor * (outside - centralPressurePa);
}

function widened(radii: QuadrantRadii | null, factor: number): QuadrantRadii | null {
  return radii === null ? null : [radii[0] * factor, radii[1] * factor, radii[2] * factor, radii[3] * factor];
}

type Leg = { readonly from: number; readonly to: number; readonly atStart: number; readonly atEnd: number };

/** Bearings at both ends of every leg that moves. */
function legBearings(places: readonly Place[]): Leg[] {
  return places.slice(1).flatMap((b, i) => {
    const a = places[i]!;
    if (greatCircleDistance(a, b) < STANDING) return [];
    return [
      { from: i, to: i + 1, atStart: initialBearing(a, b), atEnd: normalisedBearing(initialBearing(b, a) + 180) },
    ];
  });
}

/** The turn from one bearing to another, -180..180, clockwise when positive [deg]. */
function turnBetween(from: number, to: number): number {
  const turn = radians(to - from);
  return degrees(Math.atan2(Math.sin(turn), Math.cos(turn)));
}

function within(part: keyof TrackChange, value: number): number {
  const [least, most] = CHANGE_BOUNDS[part];
  return Math.min(Math.max(value, least), most);
}

/** Rounded to one part in `parts`; never minus zero. */
function rounded(value: number, parts: number): number {
  return Math.round(value * parts) / parts + 0;
}
