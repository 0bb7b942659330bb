import { DomainError } from '../errors.ts';
import {
  complexArray,
  fourierPlan,
  inverseTransform,
  transform,
  type ComplexArray,
  type FourierPlan,
} from '../numerics/fourier.ts';

/** Numbers of grid points along a side that are offered. */
export const GRID_SIZES = [64, 96, 128, 192, 256] as const;

/** Nondivergent flow in a doubly periodic square, by its vorticity. */
export type BarotropicFlow = {
  /** Grid points along a side. */
  readonly points: number;
  /** Length of a side [m]. */
  readonly side: number;
  /** Kinematic viscosity [m² s⁻¹]. */
  readonly viscosity: number;
  /** Time over which the vorticity is drawn to `target` [s]; Infinity = free. */
  readonly relaxation: number;
  /** Largest wavenumber kept along an axis, in waves per side. */
  readonly cut: number;
  /** Vorticity's Fourier coefficients, waves -cut..cut along y (rows) and x, shape (2 cut + 1, 2 cut + 1). */
  readonly vorticity: ComplexArray;
  readonly target: ComplexArray;
  /** Coefficient (0, 0): it never changes, and induces no periodic wind [s⁻¹]. */
  readonly mean: number;
  readonly work: Workspace;
};

type Workspace = {
  /** Wave along an axis at a place of the packed arrays [rad m⁻¹], shape (2 cut + 1,). */
  readonly wave: Float64Array;
  /** Squared wave, 0 where the coefficient is cut away (outside the circle) or is the mean, packed. */
  readonly square: Float64Array;
  /** One over it, 0 where it is 0, packed. */
  readonly perSquare: Float64Array;
  readonly alongY: FourierPlan;
  readonly alongX: FourierPlan;
  readonly a: ComplexArray;
  readonly b: ComplexArray;
  readonly stage: ComplexArray;
  readonly between: ComplexArray;
  readonly slopes: readonly [ComplexArray, ComplexArray, ComplexArray, ComplexArray];
  /** Share of each coefficient left by diffusion after half a step, packed; for the step it was last worked out for. */
  readonly fade: Float64Array;
  fadeStep: number;
};

/**
 * Prepares a flow from a vorticity on the grid.
 *
 * @param setup     Points along a side, its length [m], viscosity [m² s⁻¹], relaxation time [s] (Infinity = none).
 * @param vorticity Vorticity [s⁻¹] at x = (i - points / 2) side / points and y likewise, shape (points, points), rows of
 *                  equal y; waves beyond two thirds of the grid's are cut away.
 * @param target    What relaxation draws to [s⁻¹]; the initial vorticity when left out.
 * @returns The flow at time 0.
 * @throws {DomainError} when a number is outside its range.
 * @source Pseudo-spectral method with the two-thirds rule of Orszag (1971), J. Atmos. Sci. 28, 1074.
 */
export function barotropicFlow(
  setup: { points: number; side: number; viscosity: number; relaxation?: number },
  vorticity: Float64Array,
  target: Float64Array = vorticity,
): BarotropicFlow {
  const { points, side, viscosity, relaxation = Infinity } = setup;
  if (!(points >= 16 && points <= 1024)) throw new DomainError('grid points', points, 'in 16..1024');
  if (!(side > 0 && side < Infinity)) throw new DomainError('side', side, 'above 0 m');
  if (!(viscosity >= 0 && viscosity < Infinity)) throw new DomainError('viscosity', viscosity, '0 m²/s or more');
  if (!(relaxation > 0)) throw new DomainError('relaxation time', relaxation, 'above 0 s');
  const cut = Math.floor((points - 1) / 3);
  const work = workspace(points, side, cut);
  const packed = packedFrom(vorticity, points, cut, work);
  const mean = packed.re[middle(cut)]!;
  return {
    ...{ points, side, viscosity, relaxation, cut, vorticity: packed, mean, work },
    target: target === vorticity ? copyOf(packed) : packedFrom(target, points, cut, work),
  };
}

const middle = (cut: number): number => cut * (2 * cut + 1) + cut;

function workspace(points: number, side: number, cut: number): Workspace {
  const live = 2 * cut + 1;
  const wave = Float64Array.from({ length: live }, (_, i) => (2 * Math.PI * (i - cut)) / side);
  const square = new Float64Array(live * live);
  for (let i = 0; i < live; i++) {
    for (let j = 0; j < live; j++) {
      const inside = (i - cut) ** 2 + (j - cut) ** 2 <= cut * cut;
      square[i * live + j] = inside ? wave[i]! ** 2 + wave[j]! ** 2 : 0;
    }
  }
  const packed = (): ComplexArray => complexArray(live * live);
  return {
    ...{ wave, square, perSquare: square.map((k2) => (k2 === 0 ? 0 : 1 / k2)) },
    ...{ alongY: fourierPlan(points, live), alongX: fourierPlan(points, points) },
    ...{ a: complexArray(points * points), b: complexArray(points * points), stage: packed() },
    between: packed(),
    fade: new Float64Array(live * live),
    fadeStep: NaN,
    slopes: [packed(), packed(), packed(), packed()],
  };
}

const copyOf = ({ re, im }: ComplexArray): ComplexArray => ({ re: re.slice(), im: im.slice() });

/** Packed coefficients of a real field. */
function packedFrom(field: Float64Array, points: number, cut: number, work: Workspace): ComplexArray {
  if (field.length !== points * points) throw new DomainError('vorticity values', field.length, `${points * points}`);
  const { a } = work;
  for (let y = 0; y < points; y++) {
    for (let x = 0; x < points; x++) a.re[placeOf(x, y, points)] = field[y * points + x]!;
  }
  a.im.fill(0);
  const out = complexArray((2 * cut + 1) ** 2);
  toPacked(points, cut, work, out);
  for (let i = 0; i < out.re.length; i++) {
    if (work.square[i] === 0 && i !== middle(cut)) out.re[i] = out.im[i] = 0;
  }
  return out;
}

/** Where the solver keeps a point: by x then y, counted from the middle of the square, which is its origin. */
function placeOf(x: number, y: number, points: number): number {
  const half = points / 2;
  return ((x + half) % points) * points + ((y + half) % points);
}

/** A field as callers see it: rows of equal y, from the lower left corner. */
function inRows(field: Float64Array, points: number): Float64Array {
  const rows = new Float64Array(points * points);
  for (let y = 0; y < points; y++) {
    for (let x = 0; x < points; x++) rows[y * points + x] = field[placeOf(x, y, points)]!;
  }
  return rows;
}

/** From `work.a`, laid out (x, y), to packed coefficients; scaled so that they are amplitudes. */
function toPacked(points: number, cut: number, work: Workspace, out: ComplexArray): void {
  const { alongX, alongY, a, b } = work;
  const live = 2 * cut + 1;
  const columns = transform(alongX, a, b);
  const free = columns.re === a.re ? b : a;
  const { re: columnsRe, im: columnsIm } = columns;
  const { re: freeRe, im: freeIm } = free;
  for (let j = 0; j < live; j++) {
    const row = ((j - cut + points) % points) * points;
    for (let y = 0; y < points; y++) {
      freeRe[y * live + j] = columnsRe[row + y]!;
      freeIm[y * live + j] = columnsIm[row + y]!;
    }
  }
  const done = transform(alongY, free, columns);
  const scale = 1 / (points * points);
  const { re, im } = out;
  const { re: doneRe, im: doneIm } = done;
  for (let i = 0; i < live; i++) {
    const from = ((i - cut + points) % points) * live;
    const to = i * live;
    for (let j = 0; j < live; j++) {
      re[to + j] = scale * doneRe[from + j]!;
      im[to + j] = scale * doneIm[from + j]!;
    }
  }
}

/** From packed coefficients to the grid, laid out (x, y). */
function toGrid(points: number, cut: number, work: Workspace, packed: ComplexArray): ComplexArray {
  const { alongX, alongY, a, b } = work;
  const live = 2 * cut + 1;
  a.re.fill(0, (cut + 1) * live, (points - cut) * live);
  a.im.fill(0, (cut + 1) * live, (points - cut) * live);
  for (let i = 0; i < live; i++) {
    const to = ((i - cut + points) % points) * live;
    a.re.set(packed.re.subarray(i * live, (i + 1) * live), to);
    a.im.set(packed.im.subarray(i * live, (i + 1) * live), to);
  }
  const rows = inverseTransform(alongY, a, b);
  const free = rows.re === a.re ? b : a;
  const { re: rowsRe, im: rowsIm } = rows;
  const { re: freeRe, im: freeIm } = free;
  free.re.fill(0, (cut + 1) * points, (points - cut) * points);
  free.im.fill(0, (cut + 1) * points, (points - cut) * points);
  for (let j = 0; j < live; j++) {
    const row = ((j - cut + points) % points) * points;
    for (let y = 0; y < points; y++) {
      freeRe[row + y] = rowsRe[y * live + j]!;
      freeIm[row + y] = rowsIm[y * live + j]!;
    }
  }
  return inverseTransform(alongX, free, rows);
}

/**
 * Rate of change of the packed vorticity without diffusion: two complex transforms, since u + i v and (u + i v)² hold
 * both winds and both fluxes.
 */
function slopeOf(flow: BarotropicFlow, vorticity: ComplexArray, out: ComplexArray): void {
  const { points, cut, work, relaxation, target } = flow;
  const { wave, square, stage } = work;
  const { re: stageRe, im: stageIm } = stage;
  const live = 2 * cut + 1;
  const last = live * live - 1;
  windCoefficients(flow, vorticity);
  const { re: u, im: v } = toGrid(points, cut, work, stage);
  const { re: straightFlux, im: crossFlux } = work.a;
  for (let i = 0; i < points * points; i++) {
    const east = u[i]!;
    const north = v[i]!;
    straightFlux[i] = east * east - north * north;
    crossFlux[i] = 2 * east * north;
  }
  toPacked(points, cut, work, stage);
  const pull = 1 / relaxation;
  const { re: outRe, im: outIm } = out;
  const { re, im } = vorticity;
  const { re: targetRe, im: targetIm } = target;
  for (let i = 0; i < live; i++) {
    const ky = wave[i]!;
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      if (square[at] === 0) {
        outRe[at] = outIm[at] = 0;
        continue;
      }
      const kx = wave[j]!;
      // Coefficients of a real field at opposite waves are conjugates of each other.
      const back = last - at;
      const straight = -0.5 * kx * ky;
      const crossed = 0.25 * (kx * kx - ky * ky);
      const ownRe = stageRe[at]!;
      const ownIm = stageIm[at]!;
      const backRe = stageRe[back]!;
      const backIm = stageIm[back]!;
      outRe[at] = straight * (ownRe + backRe) + crossed * (ownIm + backIm) + pull * (targetRe[at]! - re[at]!);
      outIm[at] = straight * (ownIm - backIm) + crossed * (backRe - ownRe) + pull * (targetIm[at]! - im[at]!);
    }
  }
}

/** Coefficients of u + i v of a vorticity, into `work.stage`. */
function windCoefficients({ cut, work }: BarotropicFlow, { re, im }: ComplexArray): void {
  const { wave, perSquare, stage } = work;
  const { re: stageRe, im: stageIm } = stage;
  const live = 2 * cut + 1;
  for (let i = 0; i < live; i++) {
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      const kx = wave[j]! * perSquare[at]!;
      const ky = wave[i]! * perSquare[at]!;
      stageRe[at] = kx * re[at]! - ky * im[at]!;
      stageIm[at] = kx * im[at]! + ky * re[at]!;
    }
  }
}

/**
 * Moves a flow on by one step of the classical fourth-order Runge–Kutta method; diffusion is exact.
 *
 * @param flow The flow; its vorticity is overwritten.
 * @param step Time step [s], > 0.
 * @source Integrating factor for the viscous term; Canuto et al. (1988), Spectral Methods in Fluid Dynamics, section 4.
 */
export function stepFlow(flow: BarotropicFlow, step: number): void {
  const { vorticity, work } = flow;
  const { slopes, between, fade } = work;
  const [k1, k2, k3, k4] = slopes;
  const half = step / 2;
  fadeOver(flow, half);
  slopeOf(flow, vorticity, k1);
  const parts = [
    [between.re, vorticity.re, k1.re, k2.re, k3.re, k4.re],
    [between.im, vorticity.im, k1.im, k2.im, k3.im, k4.im],
  ] as const;
  for (const [to, z, slope] of parts) {
    for (let at = 0; at < to.length; at++) to[at] = fade[at]! * (z[at]! + half * slope[at]!);
  }
  slopeOf(flow, between, k2);
  for (const [to, z, , slope] of parts) {
    for (let at = 0; at < to.length; at++) to[at] = fade[at]! * z[at]! + half * slope[at]!;
  }
  slopeOf(flow, between, k3);
  for (const [to, z, , , slope] of parts) {
    for (let at = 0; at < to.length; at++) to[at] = fade[at]! * (fade[at]! * z[at]! + step * slope[at]!);
  }
  slopeOf(flow, between, k4);
  const sixth = step / 6;
  for (const [, z, s1, s2, s3, s4] of parts) {
    for (let at = 0; at < z.length; at++) {
      const e = fade[at]!;
      z[at] = e * (e * (z[at]! + sixth * s1[at]!) + 2 * sixth * (s2[at]! + s3[at]!)) + sixth * s4[at]!;
    }
  }
}

function fadeOver({ work, viscosity }: BarotropicFlow, time: number): void {
  if (work.fadeStep === time) return;
  for (let at = 0; at < work.fade.length; at++) work.fade[at] = Math.exp(-viscosity * work.square[at]! * time);
  work.fadeStep = time;
}

/**
 * Longest step that stays stable for a wind.
 *
 * @param flow The flow.
 * @param wind Strongest wind on the grid [m s⁻¹], > 0.
 * @returns Step [s].
 * @source The stability bound of the method on the imaginary axis is 2.83 / (largest wave times wind); 2.6 leaves a margin.
 */
export function stableStep({ cut, side }: BarotropicFlow, wind: number): number {
  return 2.6 / (((2 * Math.PI * cut) / side) * wind);
}

/**
 * Vorticity on the grid.
 *
 * @param flow The flow.
 * @returns Vorticity [s⁻¹], shape (points, points), rows of equal y.
 * @source Inverse of barotropicFlow's transform.
 */
export function vorticityOnGrid({ points, cut, work, vorticity }: BarotropicFlow): Float64Array {
  return inRows(toGrid(points, cut, work, vorticity).re, points);
}

/** Wind on the grid: to the right (u) and up (v) [m s⁻¹], shape (points, points), rows of equal y. */
export type GridWind = { readonly u: Float64Array; readonly v: Float64Array };

/**
 * Wind on the grid, with the solid turning of the mean vorticity about the middle put back.
 *
 * @param flow The flow.
 * @returns The wind [m s⁻¹].
 * @source Inverse Laplacian of the vorticity; a periodic flow alone has no mean vorticity, half of it is the turning rate.
 */
export function windOnGrid(flow: BarotropicFlow): GridWind {
  const { points, side, cut, work, mean } = flow;
  windCoefficients(flow, flow.vorticity);
  const wind = toGrid(points, cut, work, work.stage);
  const u = inRows(wind.re, points);
  const v = inRows(wind.im, points);
  const turn = (0.5 * mean * side) / points;
  for (let y = 0; y < points; y++) {
    for (let x = 0; x < points; x++) {
      u[y * points + x]! -= turn * (y - points / 2);
      v[y * points + x]! += turn * (x - points / 2);
    }
  }
  return { u, v };
}

/**
 * Energy and enstrophy per unit area.
 *
 * @param flow The flow.
 * @returns Kinetic energy of the periodic part [m² s⁻²] and enstrophy about the mean vorticity [s⁻²].
 * @source Parseval's theorem.
 */
export function invariants({ vorticity, work }: BarotropicFlow): { energy: number; enstrophy: number } {
  let energy = 0;
  let enstrophy = 0;
  for (let at = 0; at < work.square.length; at++) {
    const k2 = work.square[at]!;
    if (k2 === 0) continue;
    const power = 0.5 * (vorticity.re[at]! ** 2 + vorticity.im[at]! ** 2);
    enstrophy += power;
    energy += power / k2;
  }
  return { energy, enstrophy };
}

/**
 * Pressure anomaly by nonlinear balance, relative to its mean over the square.
 *
 * @param flow    The flow.
 * @param f       Coriolis parameter, a magnitude [s⁻¹].
 * @param density Air density [kg m⁻³].
 * @returns Pressure [Pa], shape (points, points), rows of equal y.
 * @source Nonlinear balance equation, Charney (1955): laplacian of pressure / density = f zeta + 2 (psi_xx psi_yy - psi_xy²).
 */
export function balancedPressure(flow: BarotropicFlow, f: number, density: number): Float64Array {
  const { points, cut, work, vorticity } = flow;
  const { wave, square, stage, slopes } = work;
  const [curves, twist] = slopes;
  const live = 2 * cut + 1;
  // psi_xx + i psi_yy and psi_xy, from psi = -zeta / k².
  for (let i = 0; i < live; i++) {
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      const per = square[at] === 0 ? 0 : 1 / square[at]!;
      const xx = wave[j]! ** 2 * per;
      const yy = wave[i]! ** 2 * per;
      const xy = wave[i]! * wave[j]! * per;
      curves.re[at] = xx * vorticity.re[at]! - yy * vorticity.im[at]!;
      curves.im[at] = xx * vorticity.im[at]! + yy * vorticity.re[at]!;
      twist.re[at] = xy * vorticity.re[at]!;
      twist.im[at] = xy * vorticity.im[at]!;
    }
  }
  const second = toGrid(points, cut, work, curves);
  const bent = Float64Array.from(second.re, (xx, i) => xx * second.im[i]!);
  const crossed = toGrid(points, cut, work, twist).re;
  const { a } = work;
  for (let i = 0; i < points * points; i++) a.re[i] = 2 * (bent[i]! - crossed[i]! ** 2);
  a.im.fill(0);
  toPacked(points, cut, work, stage);
  for (let at = 0; at < square.length; at++) {
    const k2 = square[at]!;
    const scale = k2 === 0 ? 0 : -density / k2;
    stage.re[at] = scale * (stage.re[at]! + f * vorticity.re[at]!);
    stage.im[at] = scale * (stage.im[at]! + f * vorticity.im[at]!);
  }
  return inRows(toGrid(points, cut, work, stage).re, points);
}
