import type { BoundaryLayer } from '#engine/winds/kepert-2001.ts';

/** Mean, cosine and sine parts of the radial and the cyclonic departure from the gradient wind, in this order. */
const PARTS = 6;
const [U0, UC, US, V0, VC, VS] = [0, 1, 2, 3, 4, 5] as const;
/** Height of the lid in the longest scale on which departures die out: exp(-30) is left of them there. */
const LID_SCALES = 30;

/**
 * Surface wind around a circle from the governing equations themselves, by finite differences in height: six real ordinary
 * differential equations of the linear boundary layer under a moving vortex,
 *
 *   om du/dl - xi v = K u'',  om dv/dl + eta u = K v'',
 *   K u' = C V (u + c cos l),  K v' = C V² + 2 C V (v - c sin l) at the ground,  nothing left at the lid,
 *
 * second order throughout, solved level by level. No exponential, no complex number: nothing in common with the solution
 * in closed form.
 *
 * @returns The wind relative to the ground at an angle from the heading.
 */
export function windByDifferences(
  layer: BoundaryLayer,
  levels: number,
): (lambda: number) => { radial: number; tangential: number } {
  const { speed, slope, r, f, motion, drag, diffusivity } = layer;
  const om = speed / r;
  const xi = f + 2 * om;
  const eta = f + om + slope;
  // The slowest decay of departures with height is that of the wave against the rotation, or of the mean.
  const root = Math.sqrt(xi * eta);
  const slowest = Math.sqrt(Math.abs(root - om) / (2 * diffusivity));
  const step = LID_SCALES / slowest / levels;

  const terms = new Float64Array(PARTS * PARTS);
  const set = (row: number, column: number, value: number): void => void (terms[row * PARTS + column] = value);
  set(U0, V0, -xi);
  set(UC, US, om);
  set(UC, VC, -xi);
  set(US, UC, -om);
  set(US, VS, -xi);
  set(V0, U0, eta);
  set(VC, VS, om);
  set(VC, UC, eta);
  set(VS, VC, -om);
  set(VS, US, eta);

  const beside = diffusivity / (step * step);
  const diagonal = Float64Array.from(terms);
  for (let i = 0; i < PARTS; i++) diagonal[i * PARTS + i]! += 2 * beside;
  // From the lid down, each level is a matrix times the one below it: x(n) = beside · inverse(n) · x(n - 1).
  let inverse = inverted(diagonal);
  for (let n = levels - 2; n >= 1; n--) {
    const block = Float64Array.from(diagonal);
    for (let i = 0; i < block.length; i++) block[i]! -= beside * beside * inverse[i]!;
    inverse = inverted(block);
  }
  // At the ground the level below it is eliminated by the stress.
  const stress = drag * speed;
  const ground = Float64Array.from(diagonal);
  for (let i = 0; i < ground.length; i++) ground[i]! -= 2 * beside * beside * inverse[i]!;
  for (const part of [U0, UC, US]) ground[part * PARTS + part]! += (2 / step) * stress;
  for (const part of [V0, VC, VS]) ground[part * PARTS + part]! += (4 / step) * stress;
  const right = new Float64Array(PARTS);
  right[UC] = (-2 / step) * stress * motion;
  right[V0] = (-2 / step) * stress * speed;
  right[VS] = (4 / step) * stress * motion;
  const solver = inverted(ground);
  const part = (row: number): number => right.reduce((sum, value, i) => sum + solver[row * PARTS + i]! * value, 0);
  const [u0, uc, us, v0, vc, vs] = [part(U0), part(UC), part(US), part(V0), part(VC), part(VS)];
  return (lambda) => {
    const [cos, sin] = [Math.cos(lambda), Math.sin(lambda)];
    return {
      radial: u0 + uc * cos + us * sin + motion * cos,
      tangential: speed + v0 + vc * cos + vs * sin - motion * sin,
    };
  };
}

/** Inverse of a small matrix by Gauss–Jordan elimination with pivots. */
function inverted(matrix: Float64Array): Float64Array {
  const a = Float64Array.from(matrix);
  const b = new Float64Array(PARTS * PARTS);
  for (let i = 0; i < PARTS; i++) b[i * PARTS + i] = 1;
  for (let column = 0; column < PARTS; column++) {
    let pivot = column;
    for (let row = column + 1; row < PARTS; row++) {
      if (Math.abs(a[row * PARTS + column]!) > Math.abs(a[pivot * PARTS + column]!)) pivot = row;
    }
    for (let k = 0; k < PARTS; k++) {
      for (const m of [a, b]) {
        const kept = m[column * PARTS + k]!;
        m[column * PARTS + k] = m[pivot * PARTS + k]!;
        m[pivot * PARTS + k] = kept;
      }
    }
    const scale = 1 / a[column * PARTS + column]!;
    for (let k = 0; k < PARTS; k++) {
      a[column * PARTS + k]! *= scale;
      b[column * PARTS + k]! *= scale;
    }
    for (let row = 0; row < PARTS; row++) {
      const factor = a[row * PARTS + column]!;
      if (row === column || factor === 0) continue;
      for (let k = 0; k < PARTS; k++) {
        a[row * PARTS + k]! -= factor * a[column * PARTS + k]!;
        b[row * PARTS + k]! -= factor * b[column * PARTS + k]!;
      }
    }
  }
  return b;
}
