/**
 * Integral over 0..1 by the tanh-sinh rule, which copes with integrable poles at both ends. The function receives x and
 * 1 - x, each accurate near its own end.
 */
export function integrate01(f: (x: number, fromOne: number) => number): number {
  const h = 1 / 64;
  let sum = 0;
  for (let k = -64 * 6; k <= 64 * 6; k++) {
    const t = k * h;
    const s = (Math.PI / 2) * Math.sinh(t);
    const x = 1 / (1 + Math.exp(-2 * s));
    const fromOne = 1 / (1 + Math.exp(2 * s));
    const weight = Math.PI * Math.cosh(t) * x * fromOne;
    if (weight > 0 && x > 0 && fromOne > 0) {
      const value = f(x, fromOne) * weight;
      if (Number.isFinite(value)) sum += value;
    }
  }
  return sum * h;
}
