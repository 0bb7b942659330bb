import { DomainError } from '../errors.ts';

/** Complex transforms of many equally long columns at once. */
export type FourierPlan = {
  readonly length: number;
  readonly columns: number;
  /** Factors of the length in the order of the passes: 4, 3 or 2. */
  readonly radices: readonly number[];
  /** Cosine and sine of -2 pi k / length [1], interleaved, shape (2 length,). */
  readonly turns: Float64Array;
};

/** Real and imaginary parts, shape (length, columns) row-major each. */
export type ComplexArray = { readonly re: Float64Array; readonly im: Float64Array };

/**
 * Makes room for complex numbers.
 *
 * @param size How many.
 * @returns Zeros, shape (size,).
 * @source Workspace only.
 */
export function complexArray(size: number): ComplexArray {
  return { re: new Float64Array(size), im: new Float64Array(size) };
}

/**
 * Prepares transforms along the first index of arrays of shape (length, columns).
 *
 * @param length  Length of the transform, a product of twos and threes.
 * @param columns How many transforms stand side by side.
 * @returns The plan.
 * @throws {DomainError} when the length has another prime factor.
 * @source Stockham's self-sorting algorithm, see Van Loan (1992), Computational Frameworks for the FFT, section 1.7.
 */
export function fourierPlan(length: number, columns: number): FourierPlan {
  const refused = new DomainError('transform length', length, 'a product of twos and threes');
  if (!(length >= 1)) throw refused;
  const radices: number[] = [];
  let rest = length;
  for (const radix of [4, 3, 2]) {
    while (rest % radix === 0) {
      radices.push(radix);
      rest /= radix;
    }
  }
  if (rest !== 1) throw refused;
  const turns = new Float64Array(2 * length);
  for (let k = 0; k < length; k++) {
    turns[2 * k] = Math.cos((-2 * Math.PI * k) / length);
    turns[2 * k + 1] = Math.sin((-2 * Math.PI * k) / length);
  }
  return { length, columns, radices, turns };
}

/**
 * Sum over j of x_j exp(-2 pi i j k / length) for each column; no scaling.
 *
 * @param plan The plan.
 * @param data Input, overwritten.
 * @param work Scratch of the same size, overwritten.
 * @returns Whichever of the two holds the transform.
 * @source See fourierPlan.
 */
export function transform(plan: FourierPlan, data: ComplexArray, work: ComplexArray): ComplexArray {
  let from = data;
  let to = work;
  let span = plan.columns;
  let rest = plan.length;
  for (const radix of plan.radices) {
    if (radix === 4) passOf4(plan.turns, plan.length / rest, rest, span, from, to);
    else if (radix === 3) passOf3(plan.turns, plan.length / rest, rest, span, from, to);
    else passOf2(plan.turns, plan.length / rest, rest, span, from, to);
    rest /= radix;
    span *= radix;
    [from, to] = [to, from];
  }
  return from;
}

/**
 * The inverse sum, with exp(+2 pi i j k / length); no scaling. Swapping the parts before and after turns one into the other.
 *
 * @param plan The plan.
 * @param data Input, overwritten.
 * @param work Scratch of the same size, overwritten.
 * @returns Whichever of the two holds the transform.
 * @source See fourierPlan.
 */
export function inverseTransform(plan: FourierPlan, data: ComplexArray, work: ComplexArray): ComplexArray {
  const { re, im } = transform(plan, { re: data.im, im: data.re }, { re: work.im, im: work.re });
  return { re: im, im: re };
}

function passOf2(
  turns: Float64Array,
  stride: number,
  rest: number,
  span: number,
  x: ComplexArray,
  y: ComplexArray,
): void {
  const { re: xr, im: xi } = x;
  const { re: yr, im: yi } = y;
  const half = rest / 2;
  for (let p = 0; p < half; p++) {
    const wr = turns[2 * p * stride]!;
    const wi = turns[2 * p * stride + 1]!;
    const a = span * p;
    const b = span * (p + half);
    const to = span * 2 * p;
    for (let q = 0; q < span; q++) {
      const ar = xr[a + q]!;
      const ai = xi[a + q]!;
      const br = xr[b + q]!;
      const bi = xi[b + q]!;
      yr[to + q] = ar + br;
      yi[to + q] = ai + bi;
      const dr = ar - br;
      const di = ai - bi;
      yr[to + span + q] = dr * wr - di * wi;
      yi[to + span + q] = dr * wi + di * wr;
    }
  }
}

const ROOT_3_HALF = Math.sqrt(3) / 2;

function passOf3(
  turns: Float64Array,
  stride: number,
  rest: number,
  span: number,
  x: ComplexArray,
  y: ComplexArray,
): void {
  const { re: xr, im: xi } = x;
  const { re: yr, im: yi } = y;
  const third = rest / 3;
  for (let p = 0; p < third; p++) {
    const w1r = turns[2 * p * stride]!;
    const w1i = turns[2 * p * stride + 1]!;
    const w2r = turns[4 * p * stride]!;
    const w2i = turns[4 * p * stride + 1]!;
    const a = span * p;
    const b = span * (p + third);
    const c = span * (p + 2 * third);
    const to = span * 3 * p;
    for (let q = 0; q < span; q++) {
      const ar = xr[a + q]!;
      const ai = xi[a + q]!;
      const sr = xr[b + q]! + xr[c + q]!;
      const si = xi[b + q]! + xi[c + q]!;
      const dr = ROOT_3_HALF * (xr[b + q]! - xr[c + q]!);
      const di = ROOT_3_HALF * (xi[b + q]! - xi[c + q]!);
      yr[to + q] = ar + sr;
      yi[to + q] = ai + si;
      const er = ar - 0.5 * sr;
      const ei = ai - 0.5 * si;
      const fr = er + di;
      const fi = ei - dr;
      const gr = er - di;
      const gi = ei + dr;
      yr[to + span + q] = fr * w1r - fi * w1i;
      yi[to + span + q] = fr * w1i + fi * w1r;
      yr[to + 2 * span + q] = gr * w2r - gi * w2i;
      yi[to + 2 * span + q] = gr * w2i + gi * w2r;
    }
  }
}

function passOf4(
  turns: Float64Array,
  stride: number,
  rest: number,
  span: number,
  x: ComplexArray,
  y: ComplexArray,
): void {
  const { re: xr, im: xi } = x;
  const { re: yr, im: yi } = y;
  const quarter = rest / 4;
  for (let p = 0; p < quarter; p++) {
    const w1r = turns[2 * p * stride]!;
    const w1i = turns[2 * p * stride + 1]!;
    const w2r = turns[4 * p * stride]!;
    const w2i = turns[4 * p * stride + 1]!;
    const w3r = turns[6 * p * stride]!;
    const w3i = turns[6 * p * stride + 1]!;
    const a = span * p;
    const b = span * (p + quarter);
    const c = span * (p + 2 * quarter);
    const d = span * (p + 3 * quarter);
    const to = span * 4 * p;
    for (let q = 0; q < span; q++) {
      const acr = xr[a + q]! + xr[c + q]!;
      const aci = xi[a + q]! + xi[c + q]!;
      const amr = xr[a + q]! - xr[c + q]!;
      const ami = xi[a + q]! - xi[c + q]!;
      const bdr = xr[b + q]! + xr[d + q]!;
      const bdi = xi[b + q]! + xi[d + q]!;
      const bmr = xr[b + q]! - xr[d + q]!;
      const bmi = xi[b + q]! - xi[d + q]!;
      yr[to + q] = acr + bdr;
      yi[to + q] = aci + bdi;
      const er = amr + bmi;
      const ei = ami - bmr;
      yr[to + span + q] = er * w1r - ei * w1i;
      yi[to + span + q] = er * w1i + ei * w1r;
      const fr = acr - bdr;
      const fi = aci - bdi;
      yr[to + 2 * span + q] = fr * w2r - fi * w2i;
      yi[to + 2 * span + q] = fr * w2i + fi * w2r;
      const gr = amr - bmi;
      const gi = ami + bmr;
      yr[to + 3 * span + q] = gr * w3r - gi * w3i;
      yi[to + 3 * span + q] = gr * w3i + gi * w3r;
    }
  }
}
