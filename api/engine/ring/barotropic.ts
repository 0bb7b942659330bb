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
    ...{ wave, square, alongY: fourierPlan(points, live), alongX: fourierPlan(points, points) },
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
  for (let y = 0; y < points; y++) for (let x = 0; x < points; x++) a.re[x * points + y] = field[y * points + x]!;
  a.im.fill(0);
  const out = complexArray((2 * cut + 1) ** 2);
  toPacked(points, cut, work, out);
  for (let i = 0; i < out.re.length; i++) {
    if (work.square[i] === 0 && i !== middle(cut)) out.re[i] = out.im[i] = 0;
  }
  return out;
}

/** From `work.a`, laid out (x, y), to packed coefficients; scaled so that they are amplitudes. */
function toPacked(points: number, cut: number, work: Workspace, out: ComplexArray): void {
  const { alongX, alongY, a, b } = work;
  const live = 2 * cut + 1;
  const columns = transform(alongX, a, b);
  const free = columns.re === a.re ? b : a;
  for (let j = 0; j < live; j++) {
    const row = ((j - cut + points) % points) * points;
    for (let y = 0; y < points; y++) {
      free.re[y * live + j] = columns.re[row + y]!;
      free.im[y * live + j] = columns.im[row + y]!;
    }
  }
  const done = transform(alongY, free, columns);
  const scale = 1 / (points * points);
  for (let i = 0; i < live; i++) {
    // The origin of x and y is the middle of the square: half a side each turns every odd wave's sign.
    const row = ((i - cut + points) % points) * live;
    for (let j = 0; j < live; j++) {
      const sign = (i + j) % 2 === 0 ? scale : -scale;
      out.re[i * live + j] = sign * done.re[row + j]!;
      out.im[i * live + j] = sign * done.im[row + j]!;
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
    const row = ((i - cut + points) % points) * live;
    for (let j = 0; j < live; j++) {
      const sign = (i + j) % 2 === 0 ? 1 : -1;
      a.re[row + j] = sign * packed.re[i * live + j]!;
      a.im[row + j] = sign * packed.im[i * live + j]!;
    }
  }
  const rows = inverseTransform(alongY, a, b);
  const free = rows.re === a.re ? b : a;
  free.re.fill(0, (cut + 1) * points, (points - cut) * points);
  free.im.fill(0, (cut + 1) * points, (points - cut) * points);
  for (let j = 0; j < live; j++) {
    const row = ((j - cut + points) % points) * points;
    for (let y = 0; y < points; y++) {
      free.re[row + y] = rows.re[y * live + j]!;
      free.im[row + y] = rows.im[y * live + j]!;
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
  const live = 2 * cut + 1;
  const size = live * live;
  for (let i = 0; i < live; i++) {
    const ky = wave[i]!;
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      const k2 = square[at]!;
      const per = k2 === 0 ? 0 : 1 / k2;
      const kx = wave[j]! * per;
      const k = ky * per;
      stage.re[at] = kx * vorticity.re[at]! - k * vorticity.im[at]!;
      stage.im[at] = kx * vorticity.im[at]! + k * vorticity.re[at]!;
    }
  }
  const wind = toGrid(points, cut, work, stage);
  const { a: flux } = work;
  for (let i = 0; i < points * points; i++) {
    const u = wind.re[i]!;
    const v = wind.im[i]!;
    flux.re[i] = u * u - v * v;
    flux.im[i] = 2 * u * v;
  }
  toPacked(points, cut, work, stage);
  const pull = 1 / relaxation;
  for (let i = 0; i < live; i++) {
    const ky = wave[i]!;
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      if (square[at] === 0) {
        out.re[at] = out.im[at] = 0;
        continue;
      }
      const kx = wave[j]!;
      // Coefficients of a real field at opposite waves are conjugates of each other.
      const back = size - 1 - at;
      const sumRe = 0.5 * (stage.re[at]! + stage.re[back]!);
      const sumIm = 0.5 * (stage.im[at]! - stage.im[back]!);
      const crossRe = 0.5 * (stage.im[at]! + stage.im[back]!);
      const crossIm = -0.5 * (stage.re[at]! - stage.re[back]!);
      const straight = -kx * ky;
      const crossed = 0.5 * (kx * kx - ky * ky);
      out.re[at] = straight * sumRe + crossed * crossRe + pull * (target.re[at]! - vorticity.re[at]!);
      out.im[at] = straight * sumIm + crossed * crossIm + pull * (target.im[at]! - vorticity.im[at]!);
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
  const { vorticity: z, work } = flow;
  const { slopes, between, fade } = work;
  const [k1, k2, k3, k4] = slopes;
  const size = fade.length;
  const half = step / 2;
  const sixth = step / 6;
  fadeOver(flow, half);
  slopeOf(flow, z, k1);
  for (let at = 0; at < size; at++) {
    between.re[at] = fade[at]! * (z.re[at]! + half * k1.re[at]!);
    between.im[at] = fade[at]! * (z.im[at]! + half * k1.im[at]!);
  }
  slopeOf(flow, between, k2);
  for (let at = 0; at < size; at++) {
    between.re[at] = fade[at]! * z.re[at]! + half * k2.re[at]!;
    between.im[at] = fade[at]! * z.im[at]! + half * k2.im[at]!;
  }
  slopeOf(flow, between, k3);
  for (let at = 0; at < size; at++) {
    between.re[at] = fade[at]! * (fade[at]! * z.re[at]! + step * k3.re[at]!);
    between.im[at] = fade[at]! * (fade[at]! * z.im[at]! + step * k3.im[at]!);
  }
  slopeOf(flow, between, k4);
  for (let at = 0; at < size; at++) {
    const e = fade[at]!;
    z.re[at] = e * (e * (z.re[at]! + sixth * k1.re[at]!) + 2 * sixth * (k2.re[at]! + k3.re[at]!)) + sixth * k4.re[at]!;
    z.im[at] = e * (e * (z.im[at]! + sixth * k1.im[at]!) + 2 * sixth * (k2.im[at]! + k3.im[at]!)) + sixth * k4.im[at]!;
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
 * @source The stability bound of the method on the imaginary axis is 2.83 / (largest wave times wind); 2 leaves a margin.
 */
export function stableStep({ cut, side }: BarotropicFlow, wind: number): number {
  return 2 / (((2 * Math.PI * cut) / side) * wind);
}

/**
 * Vorticity on the grid.
 *
 * @param flow The flow.
 * @returns Vorticity [s⁻¹], shape (points, points), rows of equal y.
 * @source Inverse of barotropicFlow's transform.
 */
export function vorticityOnGrid({ points, cut, work, vorticity }: BarotropicFlow): Float64Array {
  const { re } = toGrid(points, cut, work, vorticity);
  const out = new Float64Array(points * points);
  for (let y = 0; y < points; y++) for (let x = 0; x < points; x++) out[y * points + x] = re[x * points + y]!;
  return out;
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
export function windOnGrid({ points, side, cut, work, vorticity, mean }: BarotropicFlow): GridWind {
  const { wave, square, stage } = work;
  const live = 2 * cut + 1;
  for (let i = 0; i < live; i++) {
    for (let j = 0; j < live; j++) {
      const at = i * live + j;
      const per = square[at] === 0 ? 0 : 1 / square[at]!;
      const kx = wave[j]! * per;
      const ky = wave[i]! * per;
      stage.re[at] = kx * vorticity.re[at]! - ky * vorticity.im[at]!;
      stage.im[at] = kx * vorticity.im[at]! + ky * vorticity.re[at]!;
    }
  }
  const wind = toGrid(points, cut, work, stage);
  const u = new Float64Array(points * points);
  const v = new Float64Array(points * points);
  const step = side / points;
  for (let y = 0; y < points; y++) {
    for (let x = 0; x < points; x++) {
      const at = y * points + x;
      u[at] = wind.re[x * points + y]! - 0.5 * mean * (y - points / 2) * step;
      v[at] = wind.im[x * points + y]! + 0.5 * mean * (x - points / 2) * step;
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
  const { re } = toGrid(points, cut, work, stage);
  const out = new Float64Array(points * points);
  for (let y = 0; y < points; y++) for (let x = 0; x < points; x++) out[y * points + x] = re[x * points + y]!;
  return out;
}
