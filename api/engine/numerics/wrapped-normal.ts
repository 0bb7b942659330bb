import { DomainError } from '../errors.ts';

const BISECTIONS = 50;
/** Terms of the series below this share are left out [1]. */
const LEAST_TERM = 1e-17;

/**
 * Angles that stand for a normal distribution wrapped around the circle: its quantiles at the middles of equal shares.
 *
 * @param sigma Standard deviation before wrapping [rad], in [1e-3, 10].
 * @param count Number of angles, at least 1.
 * @returns Angles about the mean, ascending in (-pi, pi) and symmetric [rad], shape (count,); share (k + 0.5) / count
 *          lies below angle k. Evenly spread in the limit of a large sigma.
 * @throws {DomainError} when either argument is outside its range.
 * @source Distribution function of the wrapped normal by its Fourier series (Mardia & Jupp 2000, Directional Statistics,
 *         section 3.5.7; from memory), inverted by bisection.
 */
export function wrappedNormalAngles(sigma: number, count: number): number[] {
  if (!(sigma >= 1e-3 && sigma <= 10)) throw new DomainError('sigma of a phase', sigma, 'in 0.001..10 rad');
  if (!(Number.isInteger(count) && count >= 1)) throw new DomainError('number of phases', count, 'a whole number ≥ 1');
  const terms: number[] = [];
  for (let k = 1; ; k++) {
    const term = Math.exp((-k * k * sigma * sigma) / 2) / k;
    if (term < LEAST_TERM) break;
    terms.push(term);
  }
  const below = (angle: number): number =>
    0.5 + (angle / 2 + terms.reduce((sum, term, k) => sum + term * Math.sin((k + 1) * angle), 0)) / Math.PI;
  // The upper half is solved, the lower mirrors it.
  const above = Array.from({ length: Math.floor(count / 2) }, (_, n) => {
    const share = 1 - (n + 0.5) / count;
    let low = 0;
    let high = Math.PI;
    for (let step = 0; step < BISECTIONS; step++) {
      const middle = (low + high) / 2;
      if (below(middle) < share) low = middle;
      else high = middle;
    }
    return (low + high) / 2;
  });
  return [...above.map((angle) => -angle), ...(count % 2 === 1 ? [0] : []), ...above.reverse()];
}
