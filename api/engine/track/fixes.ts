import { DomainError } from '../errors.ts';

/** Averaging periods in which a maximum wind may be reported [s]. */
const WIND_AVERAGING = [60, 120, 180, 600] as const;
export type WindAveraging = (typeof WIND_AVERAGING)[number];

/** Greatest reach of a wind in the quadrants NE, SE, SW, NW [m]; 0 = none. */
export type QuadrantRadii = readonly [number, number, number, number];

/** One fix of a track as given; null = not given. */
export type TrackFix = {
  /** Time on any clock [s]. */
  readonly timeS: number;
  readonly latitude: number;
  readonly longitude: number;
  readonly centralPressurePa: number | null;
  readonly ambientPressurePa: number | null;
  /** Maximum wind as reported, in the averaging period of windAveragingS [m s⁻¹]. */
  readonly maxWindMs: number | null;
  readonly windAveragingS: WindAveraging;
  readonly radiusOfMaxWindM: number | null;
  readonly radius34KtM: QuadrantRadii | null;
  readonly radius50KtM: QuadrantRadii | null;
  readonly radius64KtM: QuadrantRadii | null;
  /** Width of the vorticity ring over the radius of maximum wind [1]. */
  readonly ringWidthFraction: number | null;
  /** Eye vorticity over average vorticity [1]. */
  readonly eyeVorticityRatio: number | null;
  /** Hours since the centre last crossed from sea onto land [h]; 0 over water. */
  readonly hoursInland: number | null;
};

export type Intensity = 'pressure' | 'wind';
export type Anchor = 'mean' | 'peak';

/** One fix with everything the chain uses. */
export type ResolvedFix = {
  readonly timeS: number;
  readonly latitude: number;
  readonly longitude: number;
  readonly centralPressurePa: number;
  readonly ambientPressurePa: number;
  /** Maximum wind as reported and its averaging period, null when none was given. */
  readonly maxWindAsGivenMs: number | null;
  readonly windAveragingS: WindAveraging;
  /** Reported maximum as a 1-min wind [m s⁻¹], null when none was given. */
  readonly reportedMaxWindMs: number | null;
  /** 1-min maximum the pressure implies with this fix's radius [m s⁻¹], null when no pressure was given. */
  readonly pressureImpliedMaxWindMs: number | null;
  /** 1-min maximum in use [m s⁻¹], before any anchoring. */
  readonly maxWindMs: number;
  readonly intensitySource: Intensity;
  readonly radiusOfMaxWindM: number;
  readonly ringWidthFraction: number;
  readonly eyeVorticityRatio: number;
  readonly hoursInland: number;
  readonly translationMs: number;
  /** Bearing TOWARDS which the centre moves [deg]. */
  readonly headingDeg: number;
  readonly anchor: Anchor;
  /** 1-min maximum that drives the plain wind [m s⁻¹]: divided where anchored "peak". */
  readonly anchoredMaxWindMs: number;
  /** Axisymmetric 1-min maximum, motion taken out, after anchoring [m s⁻¹]. */
  readonly axisymmetricMaxWindMs: number;
  /** Average vorticity inside the radius of maximum wind [s⁻¹]. */
  readonly averageVorticityPerS: number;
  /** Shape parameter of the fitted vortex [1]. */
  readonly shapeB: number;
  /** Vortex amplitude over water [1]. */
  readonly amplitude: number;
  /** Angular velocity of the vortex pattern [rad s⁻¹]; null when the layer is off. */
  readonly patternRadPerS: number | null;
  /** Field → relation that filled it. */
  readonly filled: Readonly<Record<string, string>>;
  readonly flags: readonly string[];
};

/** Something the reader of a result has to know. */
export type EngineNotice = { readonly code: string; readonly text: string };

/**
 * Refuses a track the chain cannot use.
 *
 * @param fixes Fixes as given.
 * @throws {DomainError} naming the fix: fewer than two, times not strictly increasing, a place off the globe, a value that
 *         is no number, or neither pressure nor wind.
 * @source Rules of this product.
 */
export function requireTrack(fixes: readonly TrackFix[]): void {
  if (fixes.length < 2) throw new DomainError('number of fixes', fixes.length, 'at least 2');
  fixes.forEach((fix, i) => {
    const name = (quantity: string) => `${quantity} of fix ${i + 1}`;
    if (!Number.isFinite(fix.timeS)) throw new DomainError(name('time'), fix.timeS, 'a finite number');
    if (i > 0 && !(fix.timeS > fixes[i - 1]!.timeS)) {
      throw new DomainError(name('time'), fix.timeS, 'later than the fix before');
    }
    if (!(Math.abs(fix.latitude) <= 90)) throw new DomainError(name('latitude'), fix.latitude, 'in [-90, 90] degrees');
    if (!Number.isFinite(fix.longitude)) throw new DomainError(name('longitude'), fix.longitude, 'a finite number');
    if (fix.centralPressurePa === null && fix.maxWindMs === null) {
      throw new DomainError(name('intensity'), 'missing', 'given by a central pressure or a maximum wind');
    }
    if (!WIND_AVERAGING.includes(fix.windAveragingS)) {
      throw new DomainError(name('averaging period'), fix.windAveragingS, `one of ${WIND_AVERAGING.join(', ')} s`);
    }
    requirePositive(name('central pressure'), fix.centralPressurePa);
    requirePositive(name('ambient pressure'), fix.ambientPressurePa);
    requirePositive(name('radius of maximum wind'), fix.radiusOfMaxWindM);
    requireNotNegative(name('maximum wind'), fix.maxWindMs);
    requireNotNegative(name('hours inland'), fix.hoursInland);
    for (const radius of fix.radius34KtM ?? []) requireNotNegative(name('34-kt radius'), radius);
    for (const radius of fix.radius50KtM ?? []) requireNotNegative(name('50-kt radius'), radius);
    for (const radius of fix.radius64KtM ?? []) requireNotNegative(name('64-kt radius'), radius);
  });
}

function requirePositive(quantity: string, value: number | null): void {
  if (value !== null && !(value > 0 && value < Infinity)) throw new DomainError(quantity, value, 'above 0');
}

function requireNotNegative(quantity: string, value: number | null): void {
  if (value !== null && !(value >= 0 && value < Infinity)) throw new DomainError(quantity, value, '0 or more');
}
