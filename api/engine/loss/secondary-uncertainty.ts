import { DomainError } from '../errors.ts';
import { regularisedBeta } from '../numerics/beta.ts';

/** Sum of the two shapes of the beta spread around a mean damage ratio [1]: variance mu (1 - mu) / 5. */
const CONCENTRATION = 4;
const SMALL_SHAPE = 0.05;

/**
 * Expected excess of a Beta(a, b) variable over an attachment, E[(X - k)+].
 *
 * @param a First shape [1], > 0.
 * @param b Second shape [1], > 0.
 * @param k Attachment [1], any real.
 * @returns Expected excess [1]; the mean less k for k ≤ 0, 0 for k ≥ 1.
 * @throws {DomainError} when a or b is not positive.
 * @source Stop-loss transform of the beta distribution: mu [1 - I_k(a+1, b)] - k [1 - I_k(a, b)].
 */
export function betaStopLoss(a: number, b: number, k: number): number {
  const mean = a / (a + b);
  if (k <= 0) return mean - k;
  if (k >= 1) return 0;
  return mean * regularisedBeta(1 - k, b, a + 1) - k * regularisedBeta(1 - k, b, a);
}

/**
 * Expected excess of a damage ratio with mean mu and concentration 4 over an attachment, accurate relative to mu.
 *
 * With a + b = 4 the beta function is elementary, and each side of the attachment has a fast power series.
 *
 * @param mu Mean damage ratio [1], 0..1; at 0 and 1 a point mass.
 * @param k  Attachment over value [1], any real.
 * @returns Expected excess [1]; mu - k for k ≤ 0, 0 for k ≥ 1. NaN for NaN.
 * @source Stop-loss transform of the beta distribution; reflection formula for 1/B(a, 4 - a).
 */
export function damageStopLoss(mu: number, k: number): number {
  if (k <= 0) return mu - k;
  if (k >= 1 || mu === 0) return 0;
  if (mu === 1) return 1 - k;
  const a = CONCENTRATION * mu;
  const b = CONCENTRATION - a;
  if (k > 0.5) {
    const c = 1 - k;
    // (1 / bB) c^(b+1) (1/(b+1) + b * sum over n ≥ 1 of ...): written so that b near 0 stays accurate.
    // A tiny a would be lost in b = 4 - a, so the beta function is taken from the smaller shape.
    const front = a < b ? (a / b) * reciprocalBeta(a) : reciprocalBeta(b);
    return front * Math.exp((b + 1) * Math.log(c)) * (1 / (b + 1) + b * tailSeries(b, 1 - a, c));
  }
  const logK = Math.log(k);
  const front = reciprocalBeta(a);
  if (a > SMALL_SHAPE) {
    return mu - k + front * Math.exp((a + 1) * logK) * (1 / (a + 1) + a * tailSeries(a, 1 - b, k));
  }
  // The same sum with mu - k + k^(a+1) / (a+1) rearranged: for small a it is a difference of nearly equal terms.
  const head = k * Math.expm1(a * logK + logReciprocalBeta(a) - Math.log1p(a));
  return mu + head + a * front * Math.exp((a + 1) * logK) * tailSeries(a, 1 - b, k);
}

/** Sum over n ≥ 1 of (p)_n / n! x^n / [(a + n)(a + n + 1)], 0 < x ≤ 0.5. */
function tailSeries(a: number, p: number, x: number): number {
  let term = 1;
  let sum = 0;
  for (let n = 1; n < 80; n++) {
    term *= ((p + n - 1) * x) / n;
    const part = term / ((a + n) * (a + n + 1));
    sum += part;
    if (Math.abs(part) < 1e-17 * Math.abs(sum)) break;
  }
  return sum;
}

/** 1 / (a B(a, 4 - a)) = 6 sin(pi a) / [pi a (1-a)(2-a)(3-a)], with the removable zeros at whole a taken out. */
function reciprocalBeta(a: number): number {
  const n = Math.round(a);
  const rest = a - n;
  const angle = Math.PI * rest;
  // sin(pi a) = (-1)^n sin(pi rest); sin(pi rest) / (pi rest) tends to 1.
  const sinc = rest === 0 ? 1 : Math.sin(angle) / angle;
  switch (n) {
    case 0:
      return (6 * sinc) / ((1 - a) * (2 - a) * (3 - a));
    case 1:
      return (6 * sinc) / (a * (2 - a) * (3 - a));
    case 2:
      return (-6 * sinc) / (a * (1 - a) * (3 - a));
    case 3:
      return (6 * sinc) / (a * (1 - a) * (2 - a));
    default:
      return (6 * sinc * rest) / (a * (1 - a) * (2 - a) * (3 - a));
  }
}

/** ln of reciprocalBeta for 0 < a ≤ SMALL_SHAPE, accurate relative to a. */
function logReciprocalBeta(a: number): number {
  const square = (Math.PI * a) ** 2;
  // sin(x) / x - 1 by its series.
  const sincLessOne = (-square / 6) * (1 - (square / 20) * (1 - (square / 42) * (1 - square / 72)));
  return Math.log1p(sincLessOne) - Math.log1p(-a) - Math.log1p(-a / 2) - Math.log1p(-a / 3);
}

/**
 * Expected loss to the policy at a site whose damage ratio spreads around a mean.
 *
 * @param mu         Mean damage ratio [1], 0..1.
 * @param value      Insured value [currency], ≥ 0.
 * @param deductible Amount kept by the insured [currency], ≥ 0.
 * @param limit      Most the policy pays above the deductible [currency], ≥ 0; Infinity for none.
 * @returns Expected gross loss [currency], between 0 and the smaller of limit and mu · value. NaN for NaN.
 * @throws {DomainError} when a term is negative or the ratio lies outside 0..1.
 * @source Layer between two attachments: E[(X - d/W)+] - E[(X - (d+L)/W)+].
 */
export function expectedGross(mu: number, value: number, deductible: number, limit: number): number {
  if (mu < 0 || mu > 1) throw new DomainError('mean damage ratio', mu, 'in [0, 1]');
  if (value < 0) throw new DomainError('value', value, '≥ 0');
  if (deductible < 0) throw new DomainError('deductible', deductible, '≥ 0');
  if (limit < 0) throw new DomainError('limit', limit, '≥ 0');
  if (value === 0) return 0;
  const attach = deductible / value;
  const loss = value * (damageStopLoss(mu, attach) - damageStopLoss(mu, attach + limit / value));
  // Rounding must not push a loss past its own bounds.
  return loss < 0 ? 0 : Math.min(loss, limit, mu * value);
}
