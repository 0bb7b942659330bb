import { DomainError } from '../errors.ts';
import { fetchBySector, isLand, type LandIndex } from '../geo/land.ts';
import { REFERENCE_CURVE } from '../loss/damage-curve.ts';
import { STATE_SIZE, type Storm } from '../track/storm.ts';
import { scoreSites, type ScoreControl, type SiteBatch } from './site-peaks.ts';
import { floorCircles, outerTimesOver, strongWindArea, type Area } from './strong-wind-area.ts';

/** Roughness length taken for every land node [m]: open country. */
export const GRID_ROUGHNESS = 0.03;
/** Greatest number of nodes unless told otherwise. */
const MOST_NODES = 16_000;
const FINEST_STEP = 0.02;
const BLOCK_DEG = 0.6;
// Coarser than this the ring of strongest wind of a small storm would fall between the nodes.
const COARSEST_STEP = 0.12;

/** Peak gusts on a regular net of longitude and latitude. */
export type FootprintGrid = {
  /** Longitude of the first column and latitude of the first row [deg]; longitudes grow from there without a break. */
  readonly west: number;
  readonly south: number;
  readonly stepDeg: number;
  readonly nx: number;
  readonly ny: number;
  /**
   * Peak 3-s gust without vortices, and median and ninth decile with them [m s⁻¹], shape (ny, nx), south row first. Below
   * 20 m/s a gust may be too low, and is NaN where the storm comes nowhere near 20 m/s.
   */
  readonly plain: Float64Array;
  readonly p50: Float64Array;
  readonly p90: Float64Array;
  /** True when the storm may reach the gust floor outside the grid too. */
  readonly isPartial: boolean;
};

/**
 * Peak gusts over the area where the storm can reach 20 m/s: open country with its own fetch on land, open sea elsewhere.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param options focus: rectangle of interest [deg], such as the bounds of the sites; mostNodes: size of the grid.
 * @param control Asked for stopping and told of finished nodes, block by block; a stopped grid is not complete.
 * @returns The grid; null when the storm never reaches 20 m/s.
 * @throws {DomainError} when fewer than 100 nodes are allowed.
 * @source scoreSites at every node.
 */
export function footprintGrid(
  storm: Storm,
  land: LandIndex,
  options: { readonly focus?: Area | null; readonly mostNodes?: number } = {},
  control: ScoreControl = {},
): FootprintGrid | null {
  const mostNodes = options.mostNodes ?? MOST_NODES;
  if (!(mostNodes >= 100)) throw new DomainError('number of nodes', mostNodes, 'at least 100');
  const circles = floorCircles(storm);
  const area = strongWindArea(circles, land, options.focus ?? null, mostNodes * COARSEST_STEP ** 2);
  if (!area) return null;
  const net = netOver(area, mostNodes);
  const { nx, ny, stepDeg } = net;
  const [plain, p50, p90] = [0, 1, 2].map(() => new Float64Array(nx * ny).fill(NaN)) as [
    Float64Array,
    Float64Array,
    Float64Array,
  ];
  // Block by block, so that each is asked only about the hours in which the storm is near it.
  const side = Math.max(Math.round(BLOCK_DEG / stepDeg), 1);
  const grid: FootprintGrid = { ...net, plain, p50, p90, isPartial: area.isPartial };
  let done = 0;
  for (let j = 0; j < ny; j += side) {
    for (let i = 0; i < nx; i += side) {
      const block = { i, j, columns: Math.min(side, nx - i), rows: Math.min(side, ny - j) };
      const times = outerTimesOver(circles, areaOf(net, block));
      if (times) {
        if (control.shouldStop?.()) return grid;
        const scores = scoreSites(timesBetween(storm, ...times), nodesOf(net, block, land), REFERENCE_CURVE);
        for (let n = 0; n < block.columns * block.rows; n++) {
          const k = (j + Math.floor(n / block.columns)) * nx + i + (n % block.columns);
          plain[k] = scores.plainGust[n]!;
          p50[k] = scores.p50[n]!;
          p90[k] = scores.p90[n]!;
        }
      }
      done += block.columns * block.rows;
      control.onProgress?.(done);
    }
  }
  return grid;
}

type Block = { readonly i: number; readonly j: number; readonly columns: number; readonly rows: number };

function areaOf({ west, south, stepDeg }: Net, { i, j, columns, rows }: Block): Area {
  // A hair wider than the nodes, so that a block of one node still has an area.
  return {
    west: west + (i - 0.5) * stepDeg,
    south: south + (j - 0.5) * stepDeg,
    east: west + (i + columns - 0.5) * stepDeg,
    north: south + (j + rows - 0.5) * stepDeg,
  };
}

/** The storm between two of its outer times; whoever feels it at another time feels less than the floor. */
function timesBetween(storm: Storm, first: number, last: number): Storm {
  const from = storm.outer[first]!;
  const to = storm.outer[last]! + 1;
  return {
    ...storm,
    stateCount: to - from,
    states: storm.states.slice(from * STATE_SIZE, to * STATE_SIZE),
    outer: storm.outer.slice(first, last + 1).map((state) => state - from),
    field: storm.field && storm.field.slice(from, to),
  };
}

type Net = Pick<FootprintGrid, 'west' | 'south' | 'stepDeg' | 'nx' | 'ny'>;

/** The finest net of at most so many nodes whose nodes lie on whole multiples of its step. */
function netOver(area: Area, mostNodes: number): Net {
  for (let thousandths = 1000 * FINEST_STEP; ; thousandths += 5) {
    const stepDeg = thousandths / 1000;
    const firstColumn = Math.floor(area.west / stepDeg);
    const firstRow = Math.floor(area.south / stepDeg);
    const nx = Math.ceil(area.east / stepDeg) - firstColumn + 1;
    const ny = Math.ceil(area.north / stepDeg) - firstRow + 1;
    if (nx * ny > mostNodes) continue;
    return { west: (firstColumn * thousandths) / 1000, south: (firstRow * thousandths) / 1000, stepDeg, nx, ny };
  }
}

function nodesOf({ west, south, stepDeg }: Net, { i, j, columns, rows }: Block, land: LandIndex): SiteBatch {
  const count = columns * rows;
  const latitude = new Float64Array(count);
  const longitude = new Float64Array(count);
  const roughnessM = new Float64Array(count).fill(NaN);
  const fetchM = new Float64Array(8 * count);
  for (let k = 0; k < count; k++) {
    latitude[k] = south + (j + Math.floor(k / columns)) * stepDeg;
    longitude[k] = west + (i + (k % columns)) * stepDeg;
    if (!isLand(land, latitude[k]!, longitude[k]!)) continue;
    roughnessM[k] = GRID_ROUGHNESS;
    fetchBySector(land, latitude[k]!, longitude[k]!, fetchM, 8 * k);
  }
  return {
    count,
    latitude,
    longitude,
    roughnessM,
    fetchM,
    topographicFactor: new Float64Array(count).fill(1),
    // No loss is asked of a node.
    value: new Float64Array(count).fill(NaN),
    deductible: new Float64Array(count),
    limit: new Float64Array(count).fill(Infinity),
  };
}
