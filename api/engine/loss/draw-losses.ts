import { DomainError } from '../errors.ts';
import { chebyshevCoefficients, chebyshevRule, type ChebyshevRule } from '../numerics/chebyshev.ts';
import { meanDamage, type DamageCurve } from './damage-curve.ts';
import { expectedGross } from './secondary-uncertainty.ts';

/** Losses of single draws are rounded to this part of a currency unit before they are added up over sites. */
export const LOSS_QUANTUM = 1 / 1024;

// Tried in this order until the last coefficients say the interpolant is good enough.
const RULES: readonly ChebyshevRule[] = [8, 16, 32].map(chebyshevRule);
// Working space of each rule: values at its points, and their coefficients.
const VALUES = RULES.map(({ degree }) => new Float64Array(degree + 1));
const COEFFICIENTS = RULES.map(({ degree }) => new Float64Array(degree + 1));
const TRUNCATION = 1e-11;

/**
 * Rounds a loss to the nearest 1/1024 of a currency unit, so that sums over sites are exact and the same in any order
 * as long as they stay below 8.7e12.
 *
 * @param loss Loss [currency].
 * @returns The rounded loss [currency].
 * @source Sums of multiples of a power of two are exact in binary floating point.
 */
export function quantisedLoss(loss: number): number {
  return Math.round(loss * 1024) / 1024;
}

/**
 * Ground-up and gross loss of one site for every draw of its peak gust.
 *
 * Gross over mean damage ratio is an entire function of that ratio, whatever the curve; it is evaluated at a few
 * Chebyshev points between the lowest and the highest ratio met and interpolated for the draws.
 *
 * @param curve       A curve without faults.
 * @param value       Insured value [currency], ≥ 0.
 * @param deductible  Amount kept by the insured [currency], ≥ 0.
 * @param limit       Most the policy pays above the deductible [currency], ≥ 0; Infinity for none.
 * @param gusts       Peak 3-s gust per draw [m s⁻¹], shape (n,).
 * @param outGroundUp Receives the mean ground-up loss per draw [currency], shape (n,).
 * @param outGross    Receives the expected gross loss per draw [currency], shape (n,). The three arrays must differ.
 * @throws {DomainError} when a term is negative.
 * @source expectedGross per draw, to 1e-9 relative; interpolation as in Trefethen (2013), chapter 4.
 */
export function drawLosses(
  curve: DamageCurve,
  value: number,
  deductible: number,
  limit: number,
  gusts: Float64Array,
  outGroundUp: Float64Array,
  outGross: Float64Array,
): void {
  if (value < 0) throw new DomainError('value', value, '≥ 0');
  if (deductible < 0) throw new DomainError('deductible', deductible, '≥ 0');
  if (limit < 0) throw new DomainError('limit', limit, '≥ 0');
  const count = gusts.length;
  let lowest = Infinity;
  let highest = 0;
  for (let d = 0; d < count; d++) {
    const mu = meanDamage(curve, gusts[d]!);
    outGross[d] = mu;
    outGroundUp[d] = mu * value;
    if (mu > 0 && mu < lowest) lowest = mu;
    if (mu > highest) highest = mu;
  }
  if (highest === 0) return;
  if (value === 0) {
    outGross.set(outGroundUp);
    return;
  }
  if (lowest === highest) {
    const gross = expectedGross(highest, value, deductible, limit);
    for (let d = 0; d < count; d++) if (outGross[d]! > 0) outGross[d] = gross;
    return;
  }
  if (deductible === 0 && limit >= value) {
    outGross.set(outGroundUp);
    return;
  }
  for (let k = 0; k < RULES.length; k++) {
    const rule = RULES[k]!;
    const values = VALUES[k]!;
    writeGrossShares(rule, k === 0 ? null : VALUES[k - 1]!, lowest, highest, value, deductible, limit, values);
    const coefficients = chebyshevCoefficients(rule, values, COEFFICIENTS[k]!);
    const tail = Math.abs(coefficients[rule.degree]!) + Math.abs(coefficients[rule.degree - 1]!);
    if (tail > TRUNCATION * Math.min(values[0]!, values[rule.degree]!)) continue;
    if (rule.degree === 8) interpolateNine(coefficients, lowest, highest, limit, outGroundUp, outGross);
    else interpolate(coefficients, lowest, highest, limit, outGroundUp, outGross);
    return;
  }
  for (let d = 0; d < count; d++) outGross[d] = expectedGross(outGross[d]!, value, deductible, limit);
}

/** Gross over mean damage ratio at a rule's points; every second one is known from the rule of half the degree. */
function writeGrossShares(
  rule: ChebyshevRule,
  coarser: Float64Array | null,
  lowest: number,
  highest: number,
  value: number,
  deductible: number,
  limit: number,
  shares: Float64Array,
): void {
  for (let j = 0; j <= rule.degree; j++) {
    if (coarser && j % 2 === 0) {
      shares[j] = coarser[j / 2]!;
      continue;
    }
    const mu = j === 0 ? highest : Math.max(lowest + (highest - lowest) * (0.5 + 0.5 * rule.points[j]!), lowest);
    shares[j] = expectedGross(mu, value, deductible, limit) / mu;
  }
}

/** Turns the ratios in outGross into losses, in place: the usual case of nine coefficients, as an ordinary polynomial. */
function interpolateNine(
  c: Float64Array,
  lowest: number,
  highest: number,
  limit: number,
  groundUp: Float64Array,
  outGross: Float64Array,
): void {
  const c0 = c[0]!;
  const c1 = c[1]!;
  const c2 = c[2]!;
  const c3 = c[3]!;
  const c4 = c[4]!;
  const c5 = c[5]!;
  const c6 = c[6]!;
  const c7 = c[7]!;
  const c8 = c[8]!;
  const p0 = c0 - c2 + c4 - c6 + c8;
  const p1 = c1 - 3 * c3 + 5 * c5 - 7 * c7;
  const p2 = 2 * c2 - 8 * c4 + 18 * c6 - 32 * c8;
  const p3 = 4 * c3 - 20 * c5 + 56 * c7;
  const p4 = 8 * c4 - 48 * c6 + 160 * c8;
  const p5 = 16 * c5 - 112 * c7;
  const p6 = 32 * c6 - 256 * c8;
  const p7 = 64 * c7;
  const p8 = 128 * c8;
  const scale = 2 / (highest - lowest);
  for (let d = 0; d < outGross.length; d++) {
    const mu = outGross[d]!;
    const x = (mu - lowest) * scale - 1;
    const x2 = x * x;
    const x4 = x2 * x2;
    const low = p0 + p1 * x + (p2 + p3 * x) * x2;
    const high = p4 + p5 * x + (p6 + p7 * x) * x2 + p8 * x4;
    let gross = mu * (low + high * x4);
    const most = groundUp[d]!;
    if (gross > most) gross = most;
    if (gross > limit) gross = limit;
    outGross[d] = gross < 0 || mu === 0 ? 0 : gross;
  }
}

/** Turns the ratios in outGross into losses, in place. */
function interpolate(
  c: Float64Array,
  lowest: number,
  highest: number,
  limit: number,
  groundUp: Float64Array,
  outGross: Float64Array,
): void {
  const scale = 4 / (highest - lowest);
  const degree = c.length - 1;
  for (let d = 0; d < outGross.length; d++) {
    const mu = outGross[d]!;
    if (mu === 0) continue;
    // Clenshaw's recurrence in twice the abscissa.
    const twice = (mu - lowest) * scale - 2;
    let b1 = c[degree]!;
    let b2 = 0;
    for (let k = degree - 1; k > 0; k--) {
      const b0 = twice * b1 - b2 + c[k]!;
      b2 = b1;
      b1 = b0;
    }
    outGross[d] = Math.min(Math.max(mu * (0.5 * twice * b1 - b2 + c[0]!), 0), limit, groundUp[d]!);
  }
}
