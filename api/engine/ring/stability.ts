import { DomainError } from '../errors.ts';
import { ringVorticity, SHOULDER_SHARE, smoothRingRotation } from './profile.ts';

/** Growth rates below this share of the ring's average vorticity count as stable [1]. */
export const GROWTH_FLOOR = 0.02;
/** Wavenumbers whose growth is examined. */
const FIRST_WAVENUMBER = 3;
const LAST_WAVENUMBER = 12;
/** Ring width over the radius of maximum wind when nothing is known [1]. Judgement. */
export const DEFAULT_RING_WIDTH = 0.35;
/** Eye vorticity over average vorticity when nothing is known [1]. Judgement. */
export const DEFAULT_EYE_RATIO = 0.2;
/** Range of inner over outer ring radius in which the solver is used [1]. */
const RADIUS_RATIO_RANGE = [0.55, 0.9] as const;
/** Range of eye vorticity over average vorticity in which the solver is used [1]. */
const EYE_RATIO_RANGE = [0, 0.9] as const;

const NODES_PER_SHOULDER = 48;
// Counting line a little under the floor, so that a mode sitting on the floor is counted and then judged by its own value.
const COUNTING_HEIGHT = 0.995 * GROWTH_FLOOR;

/** One wave of the smooth ring; rates are in units of the average vorticity. */
export type RingMode = {
  readonly m: number;
  /** Growth rate [zav]; 0 below GROWTH_FLOOR. */
  readonly growth: number;
  /** Angular velocity of the pattern [zav]; null below GROWTH_FLOOR. */
  readonly pattern: number | null;
};

/** One wave of the ring with sharp edges; rates are in units of the average vorticity. */
export type SharpRingMode = {
  readonly m: number;
  readonly innerEdge: number;
  readonly outerEdge: number;
  readonly discriminant: number;
  readonly growth: number;
  /** Real frequency [zav]: one value when unstable, a pair (larger first) when neutral. */
  readonly frequency: readonly number[];
  /** Phase by which the outer crest leads the inner one [deg], negative = it lags; null when neutral. */
  readonly phaseLagDeg: number | null;
  /** Outer over inner displacement amplitude [1]; null when neutral. */
  readonly amplitudeRatio: number | null;
};

/**
 * Turns a ring width and an eye ratio into the clamped pair the solvers work with.
 *
 * @param widthFraction Ring width over the radius of maximum wind [1].
 * @param eyeRatio      Eye vorticity over average vorticity [1].
 * @returns Inner over outer radius in 0.55..0.90 and eye ratio in 0..0.9 [1].
 * @throws {DomainError} when either is not finite.
 * @source Definition; the bounds are those of this product.
 */
export function ringShape(widthFraction: number, eyeRatio: number): { delta: number; gamma: number } {
  if (!Number.isFinite(widthFraction)) throw new DomainError('ring width fraction', widthFraction, 'a finite number');
  if (!Number.isFinite(eyeRatio)) throw new DomainError('eye vorticity ratio', eyeRatio, 'a finite number');
  return {
    delta: Math.min(Math.max(1 - widthFraction, RADIUS_RATIO_RANGE[0]), RADIUS_RATIO_RANGE[1]),
    gamma: Math.min(Math.max(eyeRatio, EYE_RATIO_RANGE[0]), EYE_RATIO_RANGE[1]),
  };
}

/**
 * Edge waves of a vorticity ring with sharp edges, in closed form.
 *
 * @param delta Inner over outer ring radius [1], 0 < delta < 1.
 * @param gamma Eye vorticity over average vorticity [1], gamma < 1.
 * @param m     Azimuthal wavenumber [1], a whole number ≥ 1.
 * @returns Edge frequencies, growth and frequency in units of the average vorticity.
 * @throws {DomainError} when delta, gamma or m is outside its range.
 * @source Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223, the three-region model; phase relation derived from it.
 */
export function sharpRingMode(delta: number, gamma: number, m: number): SharpRingMode {
  if (!(delta > 0 && delta < 1)) throw new DomainError('delta', delta, 'in (0, 1)');
  if (!(gamma < 1)) throw new DomainError('gamma', gamma, 'below 1');
  if (!(Number.isInteger(m) && m >= 1)) throw new DomainError('m', m, 'a whole number ≥ 1');
  const ring = 1 - delta * delta;
  const a = (1 - gamma) / ring;
  const b = (1 - gamma * delta * delta) / ring;
  const innerEdge = (m * gamma + a) / 2;
  const outerEdge = (m - b) / 2;
  const difference = innerEdge - outerEdge;
  const coupling = a * b * delta ** (2 * m);
  const discriminant = difference * difference - coupling;
  const sum = innerEdge + outerEdge;
  if (discriminant > -1e-12) {
    const split = Math.sqrt(Math.max(discriminant, 0)) / 2;
    const frequency = [sum / 2 + split, sum / 2 - split];
    return { m, innerEdge, outerEdge, discriminant, growth: 0, frequency, phaseLagDeg: null, amplitudeRatio: null };
  }
  return {
    m,
    innerEdge,
    outerEdge,
    discriminant,
    growth: Math.sqrt(-discriminant) / 2,
    frequency: [sum / 2],
    phaseLagDeg: (-Math.acos(-difference / Math.sqrt(coupling)) * 180) / Math.PI,
    amplitudeRatio: delta * Math.sqrt(a / b),
  };
}

/**
 * Edge waves m = 1..12 of the sharp ring.
 *
 * @param delta Inner over outer ring radius [1], 0 < delta < 1.
 * @param gamma Eye vorticity over average vorticity [1], gamma < 1.
 * @returns Twelve modes in order of m, rates in units of the average vorticity.
 * @throws {DomainError} when delta or gamma is outside its range.
 * @source Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223.
 */
export function sharpRingModes(delta: number, gamma: number): SharpRingMode[] {
  return Array.from({ length: LAST_WAVENUMBER }, (_, i) => sharpRingMode(delta, gamma, i + 1));
}

/** Nodes of the smooth ring on its two shoulders, inner to outer, lengths in units of the outer ring radius. */
export type RingNodes = {
  readonly radius: Float64Array;
  readonly spacing: Float64Array;
  /** Radial vorticity gradient [zav per outer radius]. */
  readonly gradient: Float64Array;
  /** Angular velocity of the flow [zav]. */
  readonly rotation: Float64Array;
};

/**
 * Discretises the smooth ring: vorticity changes only on two shoulders, so only they carry nodes.
 *
 * @param delta            Inner over outer ring radius [1], 0 < delta < 1, with a shoulder that stays off the axis.
 * @param gamma            Eye vorticity over average vorticity [1].
 * @param nodesPerShoulder Midpoint nodes on each shoulder [1].
 * @param shoulderShare    Half width of a shoulder over the ring width [1], at most 0.5.
 * @returns Radii, spacings, vorticity gradients and angular velocities, shape (2·nodesPerShoulder,).
 * @throws {DomainError} when the shoulders overlap or reach the axis.
 * @source Cubic shoulders with their exact circulation; model of Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223.
 */
export function ringNodes(
  delta: number,
  gamma: number,
  nodesPerShoulder = NODES_PER_SHOULDER,
  shoulderShare = SHOULDER_SHARE,
): RingNodes {
  const half = shoulderShare * (1 - delta);
  if (!(half > 0 && shoulderShare <= 0.5 && delta > half)) {
    throw new DomainError('delta', delta, 'such that both shoulders lie between the axis and each other');
  }
  const shape = { delta, gamma };
  const ring = ringVorticity(shape);
  const count = 2 * nodesPerShoulder;
  const radius = new Float64Array(count);
  const spacing = new Float64Array(count).fill((2 * half) / nodesPerShoulder);
  const gradient = new Float64Array(count);
  const rotation = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const outer = i >= nodesPerShoulder;
    const s = ((i % nodesPerShoulder) + 0.5) / nodesPerShoulder;
    const r = (outer ? 1 : delta) + half * (2 * s - 1);
    radius[i] = r;
    gradient[i] = ((outer ? -ring : ring - gamma) * 6 * s * (1 - s)) / (2 * half);
    rotation[i] = smoothRingRotation(r, shape, shoulderShare);
  }
  return { radius, spacing, gradient, rotation };
}

/**
 * Growth and pattern speed of waves m = 3..12 on the smooth ring.
 *
 * The kernel (r</r>)^m is semiseparable, so the characteristic function of the dense eigenproblem costs one sweep over
 * the nodes. The argument principle on the line Im = floor proves how many growing waves there are; Newton finds them.
 *
 * @param delta Inner over outer ring radius [1], 0.5 ≤ delta ≤ 0.95.
 * @param gamma Eye vorticity over average vorticity [1], 0 ≤ gamma ≤ 1.
 * @returns Ten modes in order of m, rates in units of the average vorticity; growth 0 and pattern null below the floor.
 * @throws {DomainError} when delta or gamma is outside its range, or a counted mode cannot be located.
 * @source Model of Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223, with smooth shoulders; solver derived here.
 */
export function smoothRingModes(delta: number, gamma: number): RingMode[] {
  if (!(delta >= 0.5 && delta <= 0.95)) throw new DomainError('delta', delta, 'in [0.5, 0.95]');
  if (!(gamma >= 0 && gamma <= 1)) throw new DomainError('gamma', gamma, 'in [0, 1]');
  const nodes = ringNodes(delta, gamma);
  const modes: RingMode[] = [];
  for (let m = FIRST_WAVENUMBER; m <= LAST_WAVENUMBER; m++) modes.push(smoothRingMode(nodes, delta, gamma, m));
  return modes;
}

function smoothRingMode(nodes: RingNodes, delta: number, gamma: number, m: number): RingMode {
  const wave = new Characteristic(nodes, m);
  const count = wave.zerosAbove(COUNTING_HEIGHT);
  const roots: Complex[] = [];
  for (const start of count > 0 ? wave.startsFor(delta, gamma) : []) {
    const root = wave.zeroNear(start, roots);
    if (root && root.im >= COUNTING_HEIGHT) roots.push(root);
    if (roots.length === count) break;
  }
  if (roots.length < count) throw new DomainError('ring', `delta ${delta}, gamma ${gamma}, m ${m}`, 'solvable');
  let best: Complex | null = null;
  for (const root of roots) if (root.im >= GROWTH_FLOOR && (!best || root.im > best.im)) best = root;
  return best ? { m, growth: best.im, pattern: best.re / m } : { m, growth: 0, pattern: null };
}

type Complex = { re: number; im: number };

/**
 * F(nu) = det(nu - M) / prod(nu - m omega_i) for the ring matrix M, and its derivative, by one sweep from the axis out.
 * F tends to 1 far away and its only poles lie on the real axis.
 */
class Characteristic {
  private readonly size: number;
  private readonly pole: Float64Array;
  private readonly inward: Float64Array;
  private readonly outward: Float64Array;
  private readonly toInner: Float64Array;
  private readonly toOuter: Float64Array;
  re = 0;
  im = 0;
  slopeRe = 0;
  slopeIm = 0;

  constructor(
    nodes: RingNodes,
    private readonly m: number,
  ) {
    const n = nodes.radius.length;
    this.size = n;
    this.pole = new Float64Array(n);
    this.inward = new Float64Array(n);
    this.outward = new Float64Array(n);
    this.toInner = new Float64Array(n);
    this.toOuter = new Float64Array(n);
    for (let i = 0; i < n; i++) {
      const r = nodes.radius[i]!;
      const power = r ** m;
      const strength = nodes.gradient[i]! / (2 * r);
      this.pole[i] = m * nodes.rotation[i]!;
      this.inward[i] = strength / power;
      this.outward[i] = strength * power;
      this.toInner[i] = r * power * nodes.spacing[i]!;
      this.toOuter[i] = (r / power) * nodes.spacing[i]!;
    }
  }

  /** Evaluates F and F' at nu into re, im, slopeRe, slopeIm. */
  at(nuRe: number, nuIm: number): void {
    const { pole, inward, outward, toInner, toOuter } = this;
    let pRe = 0;
    let pIm = 0;
    let qRe = 1;
    let qIm = 0;
    let dpRe = 0;
    let dpIm = 0;
    let dqRe = 0;
    let dqIm = 0;
    for (let i = 0; i < this.size; i++) {
      const x = nuRe - pole[i]!;
      const scale = 1 / (x * x + nuIm * nuIm);
      const wRe = x * scale;
      const wIm = -nuIm * scale;
      const a = inward[i]!;
      const b = outward[i]!;
      const fRe = a * pRe + b * qRe;
      const fIm = a * pIm + b * qIm;
      const vRe = fRe * wRe - fIm * wIm;
      const vIm = fRe * wIm + fIm * wRe;
      const gRe = a * dpRe + b * dqRe - vRe;
      const gIm = a * dpIm + b * dqIm - vIm;
      const dvRe = gRe * wRe - gIm * wIm;
      const dvIm = gRe * wIm + gIm * wRe;
      const s = toInner[i]!;
      const t = toOuter[i]!;
      pRe += s * vRe;
      pIm += s * vIm;
      qRe -= t * vRe;
      qIm -= t * vIm;
      dpRe += s * dvRe;
      dpIm += s * dvIm;
      dqRe -= t * dvRe;
      dqIm -= t * dvIm;
    }
    this.re = qRe;
    this.im = qIm;
    this.slopeRe = dqRe;
    this.slopeIm = dqIm;
  }

  /** Zeros of F with imaginary part above `height`, by the turning of F along that line (there are no poles above it). */
  zerosAbove(height: number): number {
    let lowest = Infinity;
    let highest = -Infinity;
    for (const p of this.pole) {
      lowest = Math.min(lowest, p);
      highest = Math.max(highest, p);
    }
    const far = 200 + highest;
    let x = -far;
    this.at(x, height);
    const first = Math.atan2(this.im, this.re);
    let angle = first;
    let turned = 0;
    let rate = this.turning();
    while (x < far) {
      // Every zero or pole is at least `height` from the line or in the growing range; far away, steps grow with distance.
      const outside = Math.max(lowest - 1 - x, x - highest - 1, 0);
      let step = Math.min(height + 0.5 * outside, far - x);
      if (x < lowest - 1) step = Math.min(step, Math.max(lowest - 1 - x, height));
      for (;;) {
        this.at(x + step, height);
        const next = Math.atan2(this.im, this.re);
        const nextRate = this.turning();
        const change = wrapped(next - angle);
        if (step < 1e-9 || Math.abs(change - 0.5 * step * (rate + nextRate)) < 0.4) {
          turned += change;
          angle = next;
          rate = nextRate;
          x += step;
          break;
        }
        step /= 2;
      }
    }
    // The return path far above, where F stays near 1, turns by the difference of the end angles.
    return Math.round((turned + wrapped(first - angle)) / (2 * Math.PI));
  }

  /** Starting points for Newton, likeliest first: the sharp ring, then a net over all frequencies the flow allows. */
  *startsFor(delta: number, gamma: number): Generator<Complex> {
    const sharp = gamma < 1 ? sharpRingMode(delta, gamma, this.m).growth : 0;
    const re = (this.m + (this.m - 1) * gamma) / 4;
    for (const im of [0.8 * sharp, 0.1, 0.4, 0.05]) if (im > GROWTH_FLOOR) yield { re, im };
    const lowest = Math.min(...this.pole);
    const highest = Math.max(...this.pole);
    for (let k = 0; k <= 40; k++) {
      for (const im of [0.022, 0.06, 0.2, 0.6]) yield { re: lowest + ((highest - lowest) * k) / 40, im };
    }
  }

  /** Newton's method on F divided by the known zeros; null when it does not settle. */
  zeroNear(start: Complex, known: readonly Complex[]): Complex | null {
    let { re, im } = start;
    for (let iteration = 0; iteration < 40; iteration++) {
      this.at(re, im);
      const size = this.re * this.re + this.im * this.im;
      if (size === 0) return { re, im };
      let logRe = (this.slopeRe * this.re + this.slopeIm * this.im) / size;
      let logIm = (this.slopeIm * this.re - this.slopeRe * this.im) / size;
      for (const zero of known) {
        const dRe = re - zero.re;
        const dIm = im - zero.im;
        const d2 = dRe * dRe + dIm * dIm;
        if (d2 === 0) return null;
        logRe -= dRe / d2;
        logIm += dIm / d2;
      }
      const slope = logRe * logRe + logIm * logIm;
      const stepRe = -logRe / slope;
      const stepIm = logIm / slope;
      re += stepRe;
      im += stepIm;
      if (!(im > 0.5 * COUNTING_HEIGHT)) return null;
      if (Math.abs(stepRe) + Math.abs(stepIm) < 1e-14 * Math.abs(re)) return { re, im };
    }
    return null;
  }

  /** d(arg F)/dx along a horizontal line. */
  private turning(): number {
    return (this.slopeIm * this.re - this.slopeRe * this.im) / (this.re * this.re + this.im * this.im);
  }
}

function wrapped(angle: number): number {
  return angle - 2 * Math.PI * Math.round(angle / (2 * Math.PI));
}
