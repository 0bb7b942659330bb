/** Interpolation at n + 1 Chebyshev–Lobatto points: their abscissae and the matrix from values to coefficients. */
export type ChebyshevRule = {
  readonly degree: number;
  /** Points in [-1, 1], from 1 down to -1, shape (degree + 1,). */
  readonly points: Float64Array;
  /** Row-major matrix, shape (degree + 1, degree + 1): coefficients = matrix · values. */
  readonly matrix: Float64Array;
};

/**
 * Builds a rule for polynomial interpolation at the extrema of a Chebyshev polynomial.
 *
 * @param degree Degree of the interpolant [1], ≥ 1.
 * @returns Points and the matrix from values at them to Chebyshev coefficients.
 * @source Trefethen (2013), Approximation Theory and Approximation Practice, chapter 3.
 */
export function chebyshevRule(degree: number): ChebyshevRule {
  const n = degree;
  const points = new Float64Array(n + 1);
  const matrix = new Float64Array((n + 1) * (n + 1));
  for (let j = 0; j <= n; j++) points[j] = Math.cos((Math.PI * j) / n);
  for (let k = 0; k <= n; k++) {
    for (let j = 0; j <= n; j++) {
      const ends = (k === 0 || k === n ? 2 : 1) * (j === 0 || j === n ? 2 : 1);
      matrix[k * (n + 1) + j] = (2 * Math.cos((Math.PI * ((k * j) % (2 * n))) / n)) / (n * ends);
    }
  }
  return { degree, points, matrix };
}

/**
 * Chebyshev coefficients of the interpolant through given values.
 *
 * @param rule   Points and matrix.
 * @param values Values at the rule's points, shape (degree + 1,).
 * @param out    Receives the coefficients, shape (degree + 1,); may not alias values.
 * @returns `out`, in the unit of the values.
 * @source Trefethen (2013), Approximation Theory and Approximation Practice, chapter 3.
 */
export function chebyshevCoefficients(rule: ChebyshevRule, values: Float64Array, out: Float64Array): Float64Array {
  const size = rule.degree + 1;
  for (let k = 0; k < size; k++) {
    let sum = 0;
    for (let j = 0; j < size; j++) sum += rule.matrix[k * size + j]! * values[j]!;
    out[k] = sum;
  }
  return out;
}
