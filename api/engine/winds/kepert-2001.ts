import { DomainError } from '../errors.ts';

/** Eddy diffusivity of the boundary layer [m² s⁻¹]. Kepert (2001). */
export const KEPERT_DIFFUSIVITY = 50;
/** Gradient winds between which a match is looked for [m s⁻¹]. */
const GRADIENT_RANGE = [5, 150] as const;
/** Azimuths searched for the greatest wind of a circle; product rule. */
const AZIMUTHS = 72;
const BISECTIONS = 60;
const COSINES = Float64Array.from({ length: AZIMUTHS }, (_, i) => Math.cos((2 * Math.PI * i) / AZIMUTHS));
const SINES = Float64Array.from({ length: AZIMUTHS }, (_, i) => Math.sin((2 * Math.PI * i) / AZIMUTHS));
/** Least absolute vorticity, as a share of the angular velocity, with which the layer is solved [1]; product rule. */
const LEAST_TURNING = 0.2;

/** What the boundary layer under a moving vortex depends on at one distance from its centre. */
export type BoundaryLayer = {
  /** Gradient wind [m s⁻¹], > 0. */
  readonly speed: number;
  /** Its derivative with distance [s⁻¹]. */
  readonly slope: number;
  /** Distance from the centre [m], > 0. */
  readonly r: number;
  /** Coriolis parameter, a magnitude [s⁻¹], ≥ 0. */
  readonly f: number;
  /** Translation speed [m s⁻¹], ≥ 0. */
  readonly motion: number;
  /** Drag coefficient at 10 m of the sea [1], > 0. */
  readonly drag: number;
  /** Eddy diffusivity [m² s⁻¹], > 0. */
  readonly diffusivity: number;
};

/**
 * Surface solution around one circle: the complex amplitudes A0, A1 and A-1 of exp(0), exp(i lambda) and exp(-i lambda),
 * whose real part is the radial and whose imaginary part over S the cyclonic departure from the gradient wind.
 */
export type KepertCoefficients = {
  readonly a0Re: number;
  readonly a0Im: number;
  readonly aWithRe: number;
  readonly aWithIm: number;
  readonly aAgainstRe: number;
  readonly aAgainstIm: number;
  /** S: square root of inertial over absolute vorticity [1]. */
  readonly ratio: number;
  /** Gradient wind [m s⁻¹]. */
  readonly speed: number;
  /** Translation speed [m s⁻¹]. */
  readonly motion: number;
};

/**
 * Solves the linear boundary layer under a moving vortex at one distance from its centre.
 *
 * @param layer Gradient wind, its slope, distance, Coriolis parameter, motion, drag and diffusivity.
 * @returns Amplitudes at 10 m [m s⁻¹], for `kepertWind`.
 * @throws {DomainError} when a parameter is outside its range.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484, derived afresh. Where the absolute vorticity falls below the Coriolis
 *         parameter or a fifth of the angular velocity, the greater of these stands in for it: product rule.
 */
export function kepertCoefficients(layer: BoundaryLayer): KepertCoefficients {
  const { speed, slope, r, f, motion, drag, diffusivity } = requireLayer(layer);
  const turning = speed / r;
  const inertial = f + 2 * turning;
  const absolute = Math.max(f + turning + slope, f, LEAST_TURNING * turning);
  const q = Math.sqrt(inertial * absolute) / (2 * diffusivity);
  const ratio = Math.sqrt(inertial / absolute);
  const ga = turning / (2 * diffusivity);
  const k = (drag * speed) / diffusivity;
  const chi = k / Math.sqrt(q);
  const still = (-chi * ratio * speed) / (2 * chi * chi + 3 * chi + 2);
  // Decay rates are the roots of 2i (q ± ga) with positive real part: (1 + i) √(q + ga), and (1 + i) √(q - ga) or, where
  // q < ga, (1 - i) √(ga - q). The second enters conjugated, as its amplitude does.
  const withRate = Math.sqrt(q + ga);
  const againstRate = Math.sqrt(Math.abs(q - ga));
  const m11Re = withRate + 1.5 * k;
  const m11Im = withRate;
  const m22Re = againstRate + 1.5 * k;
  const m22Im = q < ga ? againstRate : -againstRate;
  const cross = 0.5 * k;
  const right1 = -k * motion * (0.5 - ratio);
  const right2 = -k * motion * (0.5 + ratio);
  const detRe = m11Re * m22Re - m11Im * m22Im - cross * cross;
  const detIm = m11Re * m22Im + m11Im * m22Re;
  const det = detRe * detRe + detIm * detIm;
  const n1Re = right1 * m22Re + cross * right2;
  const n1Im = right1 * m22Im;
  const n2Re = right2 * m11Re + cross * right1;
  const n2Im = right2 * m11Im;
  return {
    a0Re: still,
    a0Im: still * (1 + chi),
    aWithRe: (n1Re * detRe + n1Im * detIm) / det,
    aWithIm: (n1Im * detRe - n1Re * detIm) / det,
    aAgainstRe: (n2Re * detRe + n2Im * detIm) / det,
    aAgainstIm: -(n2Im * detRe - n2Re * detIm) / det,
    ratio,
    speed,
    motion,
  };
}

/**
 * Wind 10 m over the sea at one angle of the circle, relative to the ground.
 *
 * @param coefficients Of `kepertCoefficients`.
 * @param lambdaRad    Angle from the heading [rad], positive in the cyclonic sense: the hemisphere's sign times heading less
 *                     bearing. -π/2 is the strong side in both hemispheres.
 * @returns 10-min wind [m s⁻¹]: radial, outwards positive, and tangential, cyclonic positive.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484.
 */
export function kepertWind(
  coefficients: KepertCoefficients,
  lambdaRad: number,
): { radial: number; tangential: number } {
  const { a0Re, a0Im, aWithRe, aWithIm, aAgainstRe, aAgainstIm, ratio, speed, motion } = coefficients;
  const cos = Math.cos(lambdaRad);
  const sin = Math.sin(lambdaRad);
  const re = a0Re + (aWithRe + aAgainstRe) * cos - (aWithIm - aAgainstIm) * sin;
  const im = a0Im + (aWithIm + aAgainstIm) * cos + (aWithRe - aAgainstRe) * sin;
  return { radial: re + motion * cos, tangential: speed + im / ratio - motion * sin };
}

/**
 * Gradient wind with which the greatest surface wind on a circle is a given one.
 *
 * @param maxWind10min Greatest 10-min wind at 10 m on the circle, relative to the ground [m s⁻¹].
 * @param layerOf      The boundary layer under a gradient wind [m s⁻¹] there.
 * @returns Gradient wind in 5..150 m/s [m s⁻¹]; an end of that range where no wind within it fits.
 * @throws {DomainError} when the layer has a parameter outside its range.
 * @source Bisection over 72 azimuths, 5 degrees apart; product rule.
 */
export function matchKepertGradient(maxWind10min: number, layerOf: (gradient: number) => BoundaryLayer): number {
  let [low, high]: readonly [number, number] = GRADIENT_RANGE;
  for (let i = 0; i < BISECTIONS; i++) {
    const middle = 0.5 * (low + high);
    if (strongestKepertWind(kepertCoefficients(layerOf(middle))) < maxWind10min) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}

/**
 * Greatest surface wind on a circle.
 *
 * @param coefficients Of `kepertCoefficients`.
 * @returns 10-min wind at 10 m relative to the ground [m s⁻¹], the greatest of 72 azimuths.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484; azimuths 5 degrees apart: product rule.
 */
export function strongestKepertWind(coefficients: KepertCoefficients): number {
  const { a0Re, a0Im, aWithRe, aWithIm, aAgainstRe, aAgainstIm, ratio, speed, motion } = coefficients;
  let strongest = 0;
  for (let i = 0; i < AZIMUTHS; i++) {
    const cos = COSINES[i]!;
    const sin = SINES[i]!;
    const radial = a0Re + (aWithRe + aAgainstRe + motion) * cos - (aWithIm - aAgainstIm) * sin;
    const departure = a0Im + (aWithIm + aAgainstIm) * cos + (aWithRe - aAgainstRe) * sin;
    const tangential = speed + departure / ratio - motion * sin;
    strongest = Math.max(strongest, radial * radial + tangential * tangential);
  }
  return Math.sqrt(strongest);
}

function requireLayer(layer: BoundaryLayer): BoundaryLayer {
  for (const name of ['speed', 'r', 'drag', 'diffusivity'] as const) {
    if (!(layer[name] > 0)) throw new DomainError(name, layer[name], '> 0');
  }
  for (const name of ['f', 'motion'] as const) {
    if (!(layer[name] >= 0)) throw new DomainError(name, layer[name], '≥ 0');
  }
  return layer;
}
