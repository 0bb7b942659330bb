import { DomainError } from '../errors.ts';
import { fetchBySector, isLand, type LandIndex } from '../geo/land.ts';
import { REFERENCE_CURVE } from '../loss/damage-curve.ts';
import { STATE_SIZE, type Storm } from '../track/storm.ts';
import { scoreSites, type SiteBatch } from './site-peaks.ts';
import { strongWindArea, type Area } from './strong-wind-area.ts';

/** Roughness length taken for every land node [m]: open country. */
export const GRID_ROUGHNESS = 0.03;
/** Greatest number of nodes unless told otherwise. */
export const MOST_NODES = 10_000;
const FINEST_STEP = 0.02;
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
  /** Peak 3-s gust without vortices, and median and ninth decile with them [m s⁻¹], shape (ny, nx), south row first. */
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
 * @param control Passed on to scoreSites.
 * @returns The grid; null when the storm never reaches 20 m/s.
 * @throws {DomainError} when fewer than 100 nodes are allowed.
 * @source scoreSites at every node.
 */
export function footprintGrid(
  storm: Storm,
  land: LandIndex,
  options: { readonly focus?: Area | null; readonly mostNodes?: number } = {},
  control?: Parameters<typeof scoreSites>[3],
): FootprintGrid | null {
  const mostNodes = options.mostNodes ?? MOST_NODES;
  if (!(mostNodes >= 100)) throw new DomainError('number of nodes', mostNodes, 'at least 100');
  const area = strongWindArea(storm, land, options.focus ?? null, mostNodes * COARSEST_STEP ** 2);
  if (!area) return null;
  const net = netOver(area, mostNodes);
  const batch = nodesOf(net, land);
  const part = timesBetween(storm, area.firstOuter, area.lastOuter);
  const { plainGust, p50, p90 } = scoreSites(part, batch, REFERENCE_CURVE, control);
  return { ...net, plain: plainGust, p50, p90, isPartial: area.isPartial };
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

function nodesOf({ west, south, stepDeg, nx, ny }: Net, land: LandIndex): SiteBatch {
  const count = nx * ny;
  const latitude = new Float64Array(count);
  const longitude = new Float64Array(count);
  const roughnessM = new Float64Array(count).fill(NaN);
  const fetchM = new Float64Array(8 * count);
  for (let k = 0; k < count; k++) {
    latitude[k] = south + Math.floor(k / nx) * stepDeg;
    longitude[k] = west + (k % nx) * stepDeg;
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
