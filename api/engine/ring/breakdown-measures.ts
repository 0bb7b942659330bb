import { AIR_DENSITY } from '../constants.ts';
import {
  balancedPressure,
  invariants,
  vorticityOnGrid,
  windOnGrid,
  type BarotropicFlow,
  type GridWind,
} from './barotropic.ts';

/** What is measured of a flow. */
export type FlowMeasures = {
  /** Strongest wind anywhere near the ring [m s⁻¹]. */
  readonly maxWind: number;
  /** Strongest wind along the flow averaged around the middle [m s⁻¹], and its radius [m]. */
  readonly meanMaxWind: number;
  readonly radiusOfMeanMax: number;
  /** Lowest pressure by nonlinear balance, below the highest in the square [Pa], ≤ 0. */
  readonly minPressure: number;
  /** Separate vortices on the ring; 0 while it is whole, and once one patch is left in the middle. */
  readonly vortices: number;
  /** Energy and enstrophy over those at the start [1]. */
  readonly energyShare: number;
  readonly enstrophyShare: number;
  /** Change of the circulation over the circulation at the start [1]: rounding only. */
  readonly circulationResidual: number;
  readonly energy: number;
  readonly enstrophy: number;
  readonly circulation: number;
};

/** Coriolis parameter of the pressure's own term [s⁻¹]: 20 degrees; it adds a few per cent. */
const CORIOLIS = 5e-5;
const AZIMUTHS = 128;
const RADII = 64;
/** Winds are looked at within this many radii of maximum wind. */
const NEAR = 2.5;
/** Band of radii in which vortices are counted [radii of maximum wind]. */
const BAND = [0.35, 1.25] as const;
/** A vortex stands out of the gaps beside it by this share of the strongest vorticity in the band [1]. */
const PROMINENCE = 0.25;

/**
 * Measures a flow.
 *
 * @param flow   The flow.
 * @param radius Radius of maximum wind it started with [m].
 * @param start  Measures at the start, null at the start itself.
 * @returns Measures, and the vorticity they were taken from [s⁻¹], shape (points, points).
 * @source Definitions; pressure by the nonlinear balance equation.
 */
export function measureFlow(
  flow: BarotropicFlow,
  radius: number,
  start: FlowMeasures | null,
): FlowMeasures & { grid: Float64Array } {
  const { points, side } = flow;
  const grid = vorticityOnGrid(flow);
  const wind = windOnGrid(flow);
  const pressure = balancedPressure(flow, CORIOLIS, AIR_DENSITY);
  const { energy, enstrophy } = invariants(flow);
  const circulation = grid.reduce((sum, value) => sum + value, 0) * (side / points) ** 2;
  let lowest = Infinity;
  let highest = -Infinity;
  for (const value of pressure) {
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  return {
    grid,
    maxWind: strongestNear(wind, flow, NEAR * radius),
    ...strongestMean(wind, flow, NEAR * radius),
    minPressure: lowest - highest,
    vortices: countVortices(grid, flow, radius),
    energyShare: start ? energy / start.energy : 1,
    enstrophyShare: start ? enstrophy / start.enstrophy : 1,
    circulationResidual: start ? (circulation - start.circulation) / start.circulation : 0,
    energy,
    enstrophy,
    circulation,
  };
}

function strongestNear({ u, v }: GridWind, { points, side }: BarotropicFlow, reach: number): number {
  let most = 0;
  for (let j = 0; j < points; j++) {
    for (let i = 0; i < points; i++) {
      const r = (Math.hypot(i - points / 2, j - points / 2) * side) / points;
      if (r <= reach) most = Math.max(most, Math.hypot(u[j * points + i]!, v[j * points + i]!));
    }
  }
  return most;
}

/** Value between grid points, linear in both directions. */
function between(field: Float64Array, { points, side }: BarotropicFlow, x: number, y: number): number {
  const p = (x / side + 0.5) * points;
  const q = (y / side + 0.5) * points;
  const i = Math.min(Math.floor(p), points - 2);
  const j = Math.min(Math.floor(q), points - 2);
  const s = p - i;
  const t = q - j;
  const at = j * points + i;
  const low = field[at]! * (1 - s) + field[at + 1]! * s;
  const high = field[at + points]! * (1 - s) + field[at + points + 1]! * s;
  return low * (1 - t) + high * t;
}

function strongestMean(
  { u, v }: GridWind,
  flow: BarotropicFlow,
  reach: number,
): Pick<FlowMeasures, 'meanMaxWind' | 'radiusOfMeanMax'> {
  let meanMaxWind = 0;
  let radiusOfMeanMax = 0;
  for (let k = 1; k <= RADII; k++) {
    const r = (reach * k) / RADII;
    let sum = 0;
    for (let a = 0; a < AZIMUTHS; a++) {
      const cos = Math.cos((2 * Math.PI * a) / AZIMUTHS);
      const sin = Math.sin((2 * Math.PI * a) / AZIMUTHS);
      sum += between(v, flow, r * cos, r * sin) * cos - between(u, flow, r * cos, r * sin) * sin;
    }
    if (sum / AZIMUTHS <= meanMaxWind) continue;
    meanMaxWind = sum / AZIMUTHS;
    radiusOfMeanMax = r;
  }
  return { meanMaxWind, radiusOfMeanMax };
}

/** Peaks around the circle of the mean vorticity across the band, each parted from the next by a clear gap. */
function countVortices(grid: Float64Array, flow: BarotropicFlow, radius: number): number {
  const around = Array.from({ length: AZIMUTHS }, (_, a) => {
    const cos = Math.cos((2 * Math.PI * a) / AZIMUTHS);
    const sin = Math.sin((2 * Math.PI * a) / AZIMUTHS);
    let sum = 0;
    for (let k = 0; k < RADII / 2; k++) {
      const r = radius * (BAND[0] + ((BAND[1] - BAND[0]) * (k + 0.5)) / (RADII / 2));
      sum += between(grid, flow, r * cos, r * sin);
    }
    return sum;
  });
  const highest = Math.max(...around);
  const gap = PROMINENCE * highest;
  if (highest - Math.min(...around) < gap) return 0;
  // Going round from the lowest place, a vortex is a rise by the gap followed by a fall by the gap.
  const from = around.indexOf(Math.min(...around));
  let vortices = 0;
  let low = around[from]!;
  let high = -Infinity;
  for (let k = 1; k <= AZIMUTHS; k++) {
    const value = around[(from + k) % AZIMUTHS]!;
    if (high === -Infinity) {
      low = Math.min(low, value);
      if (value - low >= gap) high = value;
    } else {
      high = Math.max(high, value);
      if (high - value >= gap) {
        vortices += 1;
        low = value;
        high = -Infinity;
      }
    }
  }
  return vortices;
}
