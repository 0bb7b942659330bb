/** Half width of each smooth shoulder over the ring width [1]. */
export const SHOULDER_SHARE = 0.375;

/** A smooth ring in units of its outer radius and average vorticity. */
export type RingShape = {
  /** Inner over outer radius [1]. */
  readonly delta: number;
  /** Eye over average vorticity [1]. */
  readonly gamma: number;
};

/**
 * Vorticity of the ring itself for a given eye.
 *
 * @param shape The ring.
 * @returns Ring over average vorticity [1].
 * @source Definition of the average over the disc inside the outer radius.
 */
export function ringVorticity({ delta, gamma }: RingShape): number {
  return (1 - gamma * delta * delta) / (1 - delta * delta);
}

/**
 * Vorticity of the smooth ring.
 *
 * @param x             Distance from the centre over the outer radius [1], ≥ 0.
 * @param shape         The ring.
 * @param shoulderShare Half width of a shoulder over the ring width [1].
 * @returns Vorticity over average vorticity [1].
 * @source Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223, eq. 3.1: eye, ring and calm joined by cubic shoulders.
 */
export function smoothRingVorticity(x: number, shape: RingShape, shoulderShare = SHOULDER_SHARE): number {
  const half = shoulderShare * (1 - shape.delta);
  const inner = shoulder((x - shape.delta + half) / (2 * half));
  const outer = shoulder((x - 1 + half) / (2 * half));
  return shape.gamma * inner + ringVorticity(shape) * (outer - inner);
}

/**
 * Angular velocity of the smooth ring's own flow.
 *
 * @param x             Distance from the centre over the outer radius [1], > 0.
 * @param shape         The ring.
 * @param shoulderShare Half width of a shoulder over the ring width [1].
 * @returns Angular velocity over average vorticity [1].
 * @source Exact circulation of smoothRingVorticity.
 */
export function smoothRingRotation(x: number, shape: RingShape, shoulderShare = SHOULDER_SHARE): number {
  const half = shoulderShare * (1 - shape.delta);
  const inner = shoulderMoment(x, shape.delta, half);
  return (shape.gamma * inner + ringVorticity(shape) * (shoulderMoment(x, 1, half) - inner)) / (x * x);
}

/** Falls from 1 at 0 to 0 at 1. */
function shoulder(s: number): number {
  const at = Math.min(Math.max(s, 0), 1);
  return 1 - at * at * (3 - 2 * at);
}

/** Integral of x S(x) from 0 to r for a falling shoulder S of half width d around rc. */
function shoulderMoment(r: number, rc: number, d: number): number {
  const lo = rc - d;
  if (r <= lo) return (r * r) / 2;
  const s = Math.min((r - lo) / (2 * d), 1);
  const s2 = s * s;
  return (
    (lo * lo) / 2 + 2 * d * (lo * (s - s * s2 + (s2 * s2) / 2) + 2 * d * (s2 / 2 - 0.75 * s2 * s2 + 0.4 * s2 * s2 * s))
  );
}
