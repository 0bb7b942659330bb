import { DomainError } from '../errors.ts';

const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
] as const;

/**
 * Natural logarithm of the gamma function for positive arguments.
 *
 * @param x Argument [1], > 0.
 * @returns ln Gamma(x) [1], to about 14 digits.
 * @throws {DomainError} when x is not positive.
 * @source Lanczos (1964), SIAM J. Numer. Anal. B 1, 86–96; coefficients g = 7, n = 9 of P. Godfrey.
 */
export function logGamma(x: number): number {
  if (!(x > 0)) throw new DomainError('x', x, 'above 0');
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x);
  const z = x - 1;
  let sum = LANCZOS[0] as number;
  for (let i = 1; i < LANCZOS.length; i++) sum += LANCZOS[i]! / (z + i);
  const t = z + 7.5;
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(sum);
}

/**
 * Regularised incomplete beta function I_x(a, b): the chance that a Beta(a, b) variable is at most x.
 *
 * @param x Upper limit [1]; below 0 counts as 0, above 1 as 1.
 * @param a First shape [1], > 0.
 * @param b Second shape [1], > 0.
 * @returns Probability in 0..1 [1]. NaN for NaN x.
 * @throws {DomainError} when a or b is not positive.
 * @source Continued fraction of NIST DLMF 8.17.22, evaluated by the modified Lentz method.
 */
export function regularisedBeta(x: number, a: number, b: number): number {
  if (!(a > 0)) throw new DomainError('a', a, 'above 0');
  if (!(b > 0)) throw new DomainError('b', b, 'above 0');
  if (x !== x) return NaN;
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x));
  if (x < (a + 1) / (a + b + 2)) return (front * betaFraction(x, a, b)) / a;
  return 1 - (front * betaFraction(1 - x, b, a)) / b;
}

function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  let c = 1;
  let d = 1 - ((a + b) * x) / (a + 1);
  d = 1 / (Math.abs(d) < tiny ? tiny : d);
  let value = d;
  for (let m = 1; m <= 500; m++) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    for (const term of [even, odd]) {
      d = 1 + term * d;
      d = 1 / (Math.abs(d) < tiny ? tiny : d);
      c = 1 + term / c;
      if (Math.abs(c) < tiny) c = tiny;
      value *= d * c;
    }
    if (Math.abs(d * c - 1) < 1e-16) break;
  }
  return value;
}
