import { DomainError } from '../errors.ts';

const METRES_PER_KM = 1000;
/** E-folding length of the fast decay [m]. */
const FAST_LENGTH = 25_000;
/** Width of the transition from inner to outer profile [m], for rMax above and up to 20 km. */
const WIDE_TRANSITION = 25_000;
const NARROW_TRANSITION = 15_000;
const NARROW_UP_TO = 20_000;
/** Halvings of the interval that holds the start of the transition: exact to the last bit. */
const BISECTIONS = 60;

/** A sectionally continuous profile made ready for evaluation. */
export type DualExponential = {
  /** Wind at the radius of maximum wind [m s⁻¹]. */
  readonly maxWind: number;
  /** Radius of maximum wind [m]. */
  readonly rMax: number;
  /** Exponent of the power law inside [1]. */
  readonly innerExponent: number;
  /** E-folding length of the slow decay outside [m]. */
  readonly slowLength: number;
  /** Share of the fast decay, whose length is 25 km [1]. */
  readonly fastShare: number;
  /** Where the transition from inner to outer profile starts [m]. */
  readonly transitionStart: number;
  /** How wide it is [m]. */
  readonly transitionWidth: number;
};

/**
 * Dual-exponential profile of a storm, ready for evaluation.
 *
 * The start of the transition follows from a decay length of the outer profile. The published mean of the two lengths,
 * weighted by their shares, puts the maximum slightly inside rMax and above maxWind (35.07 km, 55.136 m/s for 36 km,
 * 55 m/s, 24.3 degrees). The length that belongs to the slope of the outer profile at rMax puts it there exactly.
 *
 * @param storm     Maximum wind at flight level [m s⁻¹], > 0; its radius [m], > 0; latitude of the centre [deg].
 * @param exactPeak Whether the maximum is to lie at rMax, or where the published relation puts it.
 * @returns The prepared profile.
 * @throws {DomainError} when a parameter is outside its range, or the wind so strong that the slow decay has no length.
 * @source Willoughby, Darling & Rahn (2006), Mon. Wea. Rev. 134, 1102–1120, eqs 1, 3 and 10, dual exponential; from memory.
 *         The exact peak: zero slope at rMax, derived.
 */
export function dualExponential(
  storm: { readonly maxWind: number; readonly rMax: number; readonly latitude: number },
  exactPeak: boolean,
): DualExponential {
  const { maxWind, rMax } = storm;
  const latitude = Math.abs(storm.latitude);
  if (!(maxWind > 0)) throw new DomainError('maxWind', maxWind, '> 0 m/s');
  if (!(rMax > 0)) throw new DomainError('rMax', rMax, '> 0 m');
  if (!(latitude <= 90)) throw new DomainError('latitude', storm.latitude, 'in -90..90 degrees');
  const slowLength = METRES_PER_KM * (317.1 - 2.026 * maxWind + 1.915 * latitude);
  if (!(slowLength > FAST_LENGTH)) throw new DomainError('maxWind', maxWind, 'less than 144 m/s');
  const innerExponent = 0.4067 + 0.0144 * maxWind - 0.0038 * latitude;
  const fastShare = Math.max(0, 0.0696 + 0.0049 * maxWind - 0.0064 * latitude);
  const decayLength = exactPeak
    ? 1 / ((1 - fastShare) / slowLength + fastShare / FAST_LENGTH)
    : (1 - fastShare) * slowLength + fastShare * FAST_LENGTH;
  const transitionWidth = rMax > NARROW_UP_TO ? WIDE_TRANSITION : NARROW_TRANSITION;
  const weightAtPeak = (innerExponent * decayLength) / (innerExponent * decayLength + rMax);
  const transitionStart = rMax - transitionWidth * placeOfWeight(weightAtPeak);
  return { maxWind, rMax, innerExponent, slowLength, fastShare, transitionStart, transitionWidth };
}

/**
 * Wind of a dual-exponential profile.
 *
 * @param r        Distance from the centre [m], ≥ 0; below 0 taken as 0.
 * @param prepared The profile.
 * @returns Wind [m s⁻¹] at the height and in the averaging time of its maximum. NaN for NaN. Where rMax is less than about
 *          12 km the transition reaches the centre, and the wind there is a few per cent of the maximum instead of none.
 * @source Willoughby, Darling & Rahn (2006), Mon. Wea. Rev. 134, 1102–1120, eq. 1; from memory.
 */
export function dualExponentialWind(r: number, prepared: DualExponential): number {
  const { maxWind, rMax, innerExponent, slowLength, fastShare, transitionStart, transitionWidth } = prepared;
  const distance = r < 0 ? 0 : r;
  const weight = transitionWeight((distance - transitionStart) / transitionWidth);
  const inner = weight === 1 ? 0 : (distance / rMax) ** innerExponent;
  if (weight === 0) return maxWind * inner;
  const beyond = rMax - distance;
  const outer = (1 - fastShare) * Math.exp(beyond / slowLength) + fastShare * Math.exp(beyond / FAST_LENGTH);
  return maxWind * (inner * (1 - weight) + outer * weight);
}

/** Weight of the outer profile: 0 up to the start of the transition, 1 from its end, four derivatives continuous. */
function transitionWeight(place: number): number {
  if (place <= 0) return 0;
  if (place >= 1) return 1;
  return place ** 5 * (126 + place * (-420 + place * (540 + place * (-315 + place * 70))));
}

/** Place in the transition, 0..1, at which the outer profile has a given weight. */
function placeOfWeight(weight: number): number {
  let low = 0;
  let high = 1;
  for (let k = 0; k < BISECTIONS; k++) {
    const middle = 0.5 * (low + high);
    if (transitionWeight(middle) < weight) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}
