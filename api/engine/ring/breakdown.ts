import { DomainError } from '../errors.ts';
import { seededRandom } from '../numerics/seeded-random.ts';
import { barotropicFlow, GRID_SIZES, stableStep, stepFlow, type BarotropicFlow } from './barotropic.ts';
import { measureFlow, type FlowMeasures } from './breakdown-measures.ts';
import { smoothRingVorticity } from './profile.ts';
import { ringShape } from './stability.ts';

/** A ring to be let go, and how the run is made. */
export type BreakdownSetup = {
  /** Axisymmetric 1-min maximum wind of the ring with sharp edges [m s⁻¹]. */
  readonly maxWind: number;
  readonly radiusOfMaxWind: number;
  /** Ring width over that radius, and eye over average vorticity [1]. */
  readonly widthFraction: number;
  readonly eyeRatio: number;
  /** Grid points along a side, one of GRID_SIZES. */
  readonly points: number;
  /** Side of the square in radii of maximum wind [1]; neighbours of the periodic square disturb it less when it is larger. */
  readonly sideInRadii: number;
  readonly durationS: number;
  readonly frameStepS: number;
  /** First disturbance over the ring's vorticity [1], waves 1..8 with phases from the seed. */
  readonly disturbance: number;
  readonly seed: number;
  /** Time over which the ring is rebuilt [s], as heating in the eyewall does; null = left alone. */
  readonly relaxationS: number | null;
};

/** What holds where nothing is said. */
export const DEFAULT_BREAKDOWN = {
  points: 128,
  sideInRadii: 7,
  durationS: 6 * 3600,
  frameStepS: 600,
  disturbance: 0.01,
  seed: 1,
  relaxationS: null,
} as const;

/** The flow at one time. */
export type BreakdownFrame = FlowMeasures & {
  readonly timeS: number;
  /** Vorticity [s⁻¹], shape (points, points), rows of equal y from the bottom up, anticlockwise flow. */
  readonly vorticity: Float32Array;
};

const WAVES = 8;
/** Viscosity over radius² times average vorticity [1]: costs a growing wave a few per cent. */
const VISCOSITY = 1.5e-5;
const MOST_FRAMES = 400;

/**
 * Lets a ring of vorticity go and reports frame by frame how it breaks down.
 *
 * @param setup The ring and the run.
 * @returns Frames from time 0 on, one at a time, so that a caller can show or stop it.
 * @throws {DomainError} naming the quantity, its value and its range.
 * @source Nondivergent barotropic model as in Schubert et al. (1999), J. Atmos. Sci. 56, 1197–1223; rebuilding by
 *         relaxation of the vorticity is a crude stand-in for heating.
 */
export function* breakdown(setup: BreakdownSetup): Generator<BreakdownFrame, void, undefined> {
  const flow = ringFlow(setup);
  const radius = setup.radiusOfMaxWind;
  const first = measureFlow(flow, radius, null);
  yield frameOf(0, first);
  let timeS = 0;
  let strongest = first.maxWind;
  while (timeS < setup.durationS) {
    const until = Math.min(timeS + setup.frameStepS, setup.durationS);
    // The wind can rise within a frame; a tenth in hand keeps the step stable.
    const steps = Math.ceil((until - timeS) / stableStep(flow, 1.1 * strongest));
    for (let k = 0; k < steps; k++) stepFlow(flow, (until - timeS) / steps);
    timeS = until;
    const measures = measureFlow(flow, radius, first);
    strongest = measures.maxWind;
    yield frameOf(timeS, measures);
  }
}

/**
 * The flow a breakdown starts from.
 *
 * @param setup The ring and the run.
 * @returns Smooth ring with its first disturbance; relaxation, where asked for, draws to the undisturbed ring.
 * @throws {DomainError} naming the quantity, its value and its range.
 * @source See breakdown.
 */
export function ringFlow(setup: BreakdownSetup): BarotropicFlow {
  requireSetup(setup);
  const { maxWind, radiusOfMaxWind: radius, points, sideInRadii, disturbance, relaxationS } = setup;
  const shape = ringShape(setup.widthFraction, setup.eyeRatio);
  const average = (2 * maxWind) / radius;
  const side = sideInRadii * radius;
  const { uniform } = seededRandom(setup.seed);
  const phases = Array.from({ length: WAVES }, () => 2 * Math.PI * uniform());
  const calm = new Float64Array(points * points);
  const disturbed = new Float64Array(points * points);
  // Disturb only where the ring is: the ring alone, without its eye, as a window.
  const ring = smoothRingVorticity((1 + shape.delta) / 2, { ...shape, gamma: 0 });
  for (let j = 0; j < points; j++) {
    for (let i = 0; i < points; i++) {
      const x = ((i - points / 2) * sideInRadii) / points;
      const y = ((j - points / 2) * sideInRadii) / points;
      const r = Math.hypot(x, y);
      const at = j * points + i;
      calm[at] = average * smoothRingVorticity(r, shape);
      const window = smoothRingVorticity(r, { ...shape, gamma: 0 }) / ring;
      const azimuth = Math.atan2(y, x);
      const wave = phases.reduce((sum, phase, m) => sum + Math.cos((m + 1) * azimuth + phase), 0);
      disturbed[at] = calm[at]! + disturbance * average * ring * window * wave;
    }
  }
  const viscosity = VISCOSITY * radius * radius * average;
  return barotropicFlow({ points, side, viscosity, relaxation: relaxationS ?? Infinity }, disturbed, calm);
}

function frameOf(timeS: number, measures: FlowMeasures & { grid: Float64Array }): BreakdownFrame {
  const { grid, ...rest } = measures;
  return { timeS, vorticity: Float32Array.from(grid), ...rest };
}

function requireSetup(setup: BreakdownSetup): void {
  const within = (name: string, value: number, least: number, most: number, unit: string): void => {
    if (!(value >= least && value <= most)) throw new DomainError(name, value, `in ${least}..${most}${unit}`);
  };
  within('maximum wind', setup.maxWind, 10, 110, ' m/s');
  within('radius of maximum wind', setup.radiusOfMaxWind, 2_000, 200_000, ' m');
  within('ring width fraction', setup.widthFraction, 0.1, 0.45, '');
  within('eye vorticity ratio', setup.eyeRatio, 0, 0.9, '');
  within('side in radii', setup.sideInRadii, 5, 12, '');
  within('duration', setup.durationS, 60, 48 * 3600, ' s');
  within('time between frames', setup.frameStepS, 60, 6 * 3600, ' s');
  within('number of frames', setup.durationS / setup.frameStepS, 0, MOST_FRAMES, '');
  within('disturbance', setup.disturbance, 0, 0.2, '');
  if (setup.relaxationS !== null) within('relaxation time', setup.relaxationS, 600, 1e6, ' s');
  if (!(GRID_SIZES as readonly number[]).includes(setup.points)) {
    throw new DomainError('grid points', setup.points, `one of ${GRID_SIZES.join(', ')}`);
  }
}
