import { KEPERT_DIFFUSIVITY } from './kepert-2001.ts';

/** Wind 10 m over the sea around a circle, in waves of the angle from the heading; the ground at rest. Rewritten in place. */
export type KepertCircle = {
  /** Radial wind, outwards positive: mean, and what goes with cosine and sine of the angle [m s⁻¹]. */
  radial: number;
  radialCos: number;
  radialSin: number;
  /** Cyclonic wind: the same [m s⁻¹]. */
  tangential: number;
  tangentialCos: number;
  tangentialSin: number;
};

const LEAST_WIND = 1e-6;

/**
 * Makes a circle to be filled.
 *
 * @returns A circle without wind.
 * @source Workspace only.
 */
export function makeKepertCircle(): KepertCircle {
  return { radial: 0, radialCos: 0, radialSin: 0, tangential: 0, tangentialCos: 0, tangentialSin: 0 };
}

/**
 * Surface wind of the linear boundary layer around a circle, for the inner loop: the roots of the solution lie on the
 * diagonals of the complex plane, so that real roots do and nothing is allocated.
 *
 * @param wind  Gradient wind [m s⁻¹]; below 1e-6 taken as 1e-6.
 * @param slope Its derivative with distance [s⁻¹].
 * @param r     Distance from the centre [m], > 0.
 * @param f     Coriolis parameter, a magnitude [s⁻¹].
 * @param speed Translation speed [m s⁻¹].
 * @param drag  Drag coefficient of the sea [1].
 * @param out   Receives the circle; the angle counts from the heading, positive in the cyclonic sense.
 * @source Kepert (2001), J. Atmos. Sci. 58, 2469–2484, derived afresh; the same solution in complex numbers is in
 *         kepert-2001.ts.
 */
export function writeKepertCircle(
  wind: number,
  slope: number,
  r: number,
  f: number,
  speed: number,
  drag: number,
  out: KepertCircle,
): void {
  const v = wind > LEAST_WIND ? wind : LEAST_WIND;
  const turning = v / r;
  const xi = f + 2 * turning;
  const absolute = f + turning + slope;
  const floor = f > 0.2 * turning ? f : 0.2 * turning;
  const eta = absolute > floor ? absolute : floor;
  const half = 1 / (2 * KEPERT_DIFFUSIVITY);
  const root = Math.sqrt(xi * eta);
  const perRoot = 1 / root;
  const q = root * half;
  const ratio = xi * perRoot;
  const ga = turning * half;
  const k = (drag * v) / KEPERT_DIFFUSIVITY;
  const chi = k / Math.sqrt(q);
  const still = (-chi * v) / (chi * (2 * chi + 3) + 2);
  // Waves with and against the rotation: (g + i g + 1.5 k) A - 0.5 k B = -k c (0.5 - S), and its partner.
  const g = Math.sqrt(ga + q);
  const h = Math.sqrt(q >= ga ? q - ga : ga - q);
  const re1 = g + 1.5 * k;
  const re2 = h + 1.5 * k;
  const im2 = q >= ga ? -h : h;
  const right1 = -k * speed * (0.5 - ratio);
  const right2 = -k * speed * (0.5 + ratio);
  const detRe = re1 * re2 - g * im2 - 0.25 * k * k;
  const detIm = re1 * im2 + g * re2;
  const perDet = 1 / (detRe * detRe + detIm * detIm);
  const aRe = right1 * re2 + 0.5 * k * right2;
  const aIm = right1 * im2;
  const bRe = right2 * re1 + 0.5 * k * right1;
  const bIm = right2 * g;
  const withRe = (aRe * detRe + aIm * detIm) * perDet;
  const withIm = (aIm * detRe - aRe * detIm) * perDet;
  const againstRe = (bRe * detRe + bIm * detIm) * perDet;
  const againstIm = (bIm * detRe - bRe * detIm) * perDet;
  const perRatio = eta * perRoot;
  out.radial = ratio * still;
  out.radialCos = withRe + againstRe + speed;
  out.radialSin = -withIm - againstIm;
  out.tangential = v + still * (1 + chi);
  out.tangentialCos = (withIm - againstIm) * perRatio;
  out.tangentialSin = (withRe - againstRe) * perRatio - speed;
}
