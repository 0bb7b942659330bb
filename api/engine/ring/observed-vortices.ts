import { DomainError } from '../errors.ts';
import { wrappedNormalAngles } from '../numerics/wrapped-normal.ts';
import { radians } from '../units.ts';
import { PHASE_COUNT, startingPhase } from './draws.ts';

type Sighting = {
  /** Time on the track's clock [s], and how it is told to people. */
  readonly timeS: number;
  readonly timeLabel: string;
  /** Standard error of the azimuths [deg], common to all of one picture. */
  readonly uncertaintyDeg: number;
};

/** Local maxima around the eye as radar or satellite showed them. */
export type ObservedMaxima = Sighting & {
  readonly kind: 'maxima';
  /** Bearings of the maxima seen from the centre [deg]. */
  readonly azimuthsDeg: readonly number[];
};

/** An elliptical eye: two vortices, at the ends of its long axis. */
export type ObservedEllipse = Sighting & {
  readonly kind: 'ellipse';
  /** Bearing of either end of the long axis [deg]. */
  readonly longAxisBearingDeg: number;
  /** Semi-axes [m]. */
  readonly majorM: number;
  readonly minorM: number;
  /** Time of a whole turn [s]; null = not seen. */
  readonly rotationPeriodS: number | null;
};

/** What was seen of a storm's vortices at one time. */
export type ObservedVortices = ObservedMaxima | ObservedEllipse;

/** The pattern at the storm's start, as the observations put it. */
export type ObservedPhase = {
  /** Starting phase phase0 and its standard error [rad]; one wavelength is 2 pi. */
  readonly phase: number;
  readonly sigma: number;
  /** Root mean square distance of the observed maxima from the regular pattern [rad]. */
  readonly residual: number;
};

/** Standard deviation of a phase of which nothing is known [rad]. */
export const UNKNOWN_PHASE = Math.PI / Math.sqrt(3);
// Phases closer together than this make no difference to any gust.
const LEAST_SIGMA = 1e-3;

/**
 * Refuses observations that can't be used.
 *
 * @param observations Observations.
 * @param firstS Time of the track's first fix [s].
 * @param lastS  Time of its last fix [s].
 * @throws {DomainError} naming the observation: a time outside the track, fewer than 2 or more than 8 maxima, a bearing not
 *         in 0..360 degrees, axes that make no ellipse, a period not in 10..600 min, an uncertainty not in 1..60 degrees.
 * @source Rules of this product.
 */
export function requireObservations(observations: readonly ObservedVortices[], firstS: number, lastS: number): void {
  observations.forEach((seen, i) => {
    const within = (quantity: string, value: number, least: number, most: number, range: string): void => {
      if (!(value >= least && value <= most))
        throw new DomainError(`${quantity} of observation ${i + 1}`, value, range);
    };
    within('time', seen.timeS, firstS, lastS, `within the track, ${firstS}..${lastS} s`);
    within('uncertainty', seen.uncertaintyDeg, 1, 60, 'in 1..60 degrees');
    if (seen.kind === 'maxima') {
      within('number of maxima', seen.azimuthsDeg.length, 2, 8, 'in 2..8');
      for (const azimuth of seen.azimuthsDeg) within('azimuth', azimuth, 0, 360, 'in 0..360 degrees');
      return;
    }
    within('bearing of the long axis', seen.longAxisBearingDeg, 0, 360, 'in 0..360 degrees');
    within('short semi-axis', seen.minorM, 1, seen.majorM, 'at least 1 m and not above the long one');
    within('long semi-axis', seen.majorM, 1, 500_000, 'in 1..500000 m');
    if (seen.rotationPeriodS !== null) {
      within('rotation period', seen.rotationPeriodS, 600, 36_000, 'in 600..36000 s');
    }
  });
}

/**
 * Number of vortices an observation shows.
 *
 * @param seen The observation.
 * @returns The number of maxima; 2 for an ellipse.
 * @source An ellipse is a wave of wavenumber 2 on the edge of a vortex (Kirchhoff).
 */
export function countOf(seen: ObservedVortices): number {
  return seen.kind === 'ellipse' ? 2 : seen.azimuthsDeg.length;
}

/**
 * The storm's number of vortices, and the observations that show it.
 *
 * @param observations At least one observation.
 * @returns The number with the greatest weight, 1 / uncertainty² summed, the one seen first on a tie; and its observations.
 * @source A storm keeps one wavenumber in this chain; observations of another number can't set its phase.
 */
export function observedCount(observations: readonly ObservedVortices[]): {
  wavenumber: number;
  used: readonly ObservedVortices[];
} {
  const weights = new Map<number, number>();
  for (const seen of observations) {
    weights.set(countOf(seen), (weights.get(countOf(seen)) ?? 0) + weightOf(seen));
  }
  let wavenumber = 0;
  for (const [count, weight] of weights) if (weight > (weights.get(wavenumber) ?? 0)) wavenumber = count;
  return { wavenumber, used: observations.filter((seen) => countOf(seen) === wavenumber) };
}

/**
 * Azimuths of an observation in the cyclonic sense.
 *
 * @param seen The observation.
 * @param sign 1 north, -1 south.
 * @returns Azimuths phi = sign (90 degrees - bearing) of the crests [rad]; of an ellipse both ends of the long axis.
 * @source Convention of this chain. The ends of the long axis hold the vorticity that a circle would not.
 */
export function crestAzimuths(seen: ObservedVortices, sign: number): number[] {
  const bearings =
    seen.kind === 'ellipse' ? [seen.longAxisBearingDeg, seen.longAxisBearingDeg + 180] : seen.azimuthsDeg;
  return bearings.map((bearing) => sign * radians(90 - bearing));
}

/**
 * Starting phase of the pattern from what was seen of it.
 *
 * Each maximum gives m (phi - theta); their mean around the circle is weighted by 1 / uncertainty². Its error is
 * m times the uncertainty, observations taken as independent and the maxima of one picture as not, but never less than
 * the distance of the maxima from a regular pattern.
 *
 * @param seen  Observations of m vortices: crest azimuths phi in the cyclonic sense [rad], angle theta turned by the
 *              pattern since the start [rad], uncertainty [deg].
 * @param m     Number of vortices.
 * @returns Phase in [0, 2 pi), its error and the residual [rad].
 * @source Circular mean (Mardia & Jupp 2000, Directional Statistics; from memory).
 */
export function observedPhase(
  seen: readonly {
    readonly azimuths: readonly number[];
    readonly turned: number;
    readonly uncertaintyDeg: number;
  }[],
  m: number,
): ObservedPhase {
  const phases = seen.flatMap(({ azimuths, turned, uncertaintyDeg }) =>
    azimuths.map((azimuth) => ({
      phase: m * (azimuth - turned),
      weight: 1 / (azimuths.length * uncertaintyDeg * uncertaintyDeg),
    })),
  );
  const sum = (of: (entry: (typeof phases)[number]) => number): number =>
    phases.reduce((total, entry) => total + entry.weight * of(entry), 0);
  const mean = Math.atan2(
    sum(({ phase }) => Math.sin(phase)),
    sum(({ phase }) => Math.cos(phase)),
  );
  const weight = sum(() => 1);
  const residual = Math.sqrt(sum(({ phase }) => wrapped(phase - mean) ** 2) / weight);
  const pooled = m * radians(1 / Math.sqrt(weight));
  return { phase: (mean + 2 * Math.PI) % (2 * Math.PI), sigma: Math.max(pooled, residual), residual };
}

/**
 * Starting phases of the draws.
 *
 * @param observed Phase and its error [rad]; null = nothing is known.
 * @returns 24 phases of equal weight [rad]: the midpoint quantiles of a normal distribution wrapped around the circle about
 *          the observed phase. Evenly spread, as without an observation, where the error exceeds pi / sqrt 3, the standard
 *          deviation of an even spread: such an observation says nothing.
 * @source Midpoint rule in probability.
 */
export function startingPhases(observed: Pick<ObservedPhase, 'phase' | 'sigma'> | null): readonly number[] {
  if (observed === null || observed.sigma > UNKNOWN_PHASE)
    return Array.from({ length: PHASE_COUNT }, (_, j) => startingPhase(j));
  return wrappedNormalAngles(Math.max(observed.sigma, LEAST_SIGMA), PHASE_COUNT).map((angle) => observed.phase + angle);
}

/**
 * Factor on the pattern's rate that makes it turn as the ellipses seen did.
 *
 * @param seen Ellipses: period of a turn [s], rate of the pattern in the chain at that time [rad s⁻¹], uncertainty [deg].
 * @returns Weighted geometric mean of observed over own rate [1]; 1 without ellipses.
 * @source Definition.
 */
export function patternFactor(
  seen: readonly { readonly periodS: number; readonly ownRate: number; readonly uncertaintyDeg: number }[],
): number {
  let weight = 0;
  let sum = 0;
  for (const { periodS, ownRate, uncertaintyDeg } of seen) {
    const own = 1 / (uncertaintyDeg * uncertaintyDeg);
    weight += own;
    sum += own * Math.log((2 * Math.PI) / (periodS * ownRate));
  }
  return weight > 0 ? Math.exp(sum / weight) : 1;
}

/**
 * Rate at which an elliptical patch turns.
 *
 * @param vorticity Vorticity of the patch [s⁻¹].
 * @param majorM    Long semi-axis [m].
 * @param minorM    Short semi-axis [m].
 * @returns Angular velocity of its axes [rad s⁻¹].
 * @source Kirchhoff (1876): zeta a b / (a + b)²; Lamb, Hydrodynamics, art. 159; from memory.
 */
export function kirchhoffRate(vorticity: number, majorM: number, minorM: number): number {
  return (vorticity * majorM * minorM) / (majorM + minorM) ** 2;
}

function weightOf({ uncertaintyDeg }: ObservedVortices): number {
  return 1 / (uncertaintyDeg * uncertaintyDeg);
}

function wrapped(angle: number): number {
  return angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));
}
