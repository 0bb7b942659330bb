import { VON_KARMAN } from '../constants.ts';
import { roughnessFactor } from '../terrain/roughness.ts';
import { DRAG_LINE, DRAG_RANGE, roughnessOfDrag } from '../terrain/drag.ts';

/** A function of one variable as value and slope (times the step) at equal steps, for cubic Hermite interpolation. */
export type HermiteTable = {
  readonly start: number;
  readonly perStep: number;
  /** Value and scaled slope at each node, interleaved, shape (2 nodes,). */
  readonly nodes: Float64Array;
};

function hermiteTable(
  start: number,
  end: number,
  stepsPerUnit: number,
  value: (x: number) => number,
  slope: (x: number) => number,
): HermiteTable {
  const count = Math.ceil((end - start) * stepsPerUnit) + 2;
  const nodes = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    const x = start + i / stepsPerUnit;
    nodes[2 * i] = value(x);
    nodes[2 * i + 1] = slope(x) / stepsPerUnit;
  }
  return { start, perStep: stepsPerUnit, nodes };
}

/** Range of ln x in which x exp(-x) is tabulated; beyond its end the value is below 1e-21, before it nearly x. */
export const PRESSURE_TERM_RANGE = [-12, 4] as const;
/** x exp(-x) as a function of ln x, to 4e-12. */
export const PRESSURE_TERM = hermiteTable(
  PRESSURE_TERM_RANGE[0],
  PRESSURE_TERM_RANGE[1],
  256,
  (y) => Math.exp(y - Math.exp(y)),
  (y) => (1 - Math.exp(y)) * Math.exp(y - Math.exp(y)),
);

/** Arc tangent over a quarter of pi, for 0..1, to 4e-12. */
export const EIGHTH_TURN = hermiteTable(
  0,
  1,
  256,
  (x) => Math.atan(x) / (Math.PI / 4),
  (x) => 1 / ((1 + x * x) * (Math.PI / 4)),
);

/** Winds between which the drag of the sea varies [m s⁻¹]. */
export const DRAG_WINDS = DRAG_RANGE.map((drag) => (drag - DRAG_LINE[0]) / DRAG_LINE[1]) as [number, number];

/** One over the roughness factor of the sea, for winds of DRAG_WINDS, to 1e-12. */
export const PER_SEA_FACTOR = hermiteTable(DRAG_WINDS[0], DRAG_WINDS[1], 32, perSeaFactor, perSeaFactorSlope);

function perSeaFactor(wind: number): number {
  return 1 / roughnessFactor(roughnessOfDrag(DRAG_LINE[0] + DRAG_LINE[1] * wind));
}

/** Derivative of 1 / (kr L) with L = ln(10 / z0) = 0.4 / sqrt(Cd), kr ~ exp(-0.07 L). */
function perSeaFactorSlope(wind: number): number {
  const drag = DRAG_LINE[0] + DRAG_LINE[1] * wind;
  const depth = VON_KARMAN / Math.sqrt(drag);
  const depthSlope = (-0.5 * depth * DRAG_LINE[1]) / drag;
  return perSeaFactor(wind) * (0.07 - 1 / depth) * depthSlope;
}
