import { DomainError } from '../errors.ts';
import { fetchBySector, isLand, type LandIndex } from '../geo/land.ts';
import { REFERENCE_CURVE } from '../loss/damage-curve.ts';
import { STATE_SIZE, type Storm } from '../track/storm.ts';
import { scoreSites, type ScoreControl, type SiteBatch, type SiteScores } from './site-peaks.ts';
import { floorCircles, outerTimesOver, strongWindArea, type Area } from './strong-wind-area.ts';

/** Roughness length taken for every land node [m]: open country. */
export const GRID_ROUGHNESS = 0.03;
/** Greatest number of nodes unless told otherwise. */
const MOST_NODES = 16_000;
const FINEST_STEP = 0.02;
const BLOCK_DEG = 0.6;
// Coarser than this the ring of strongest wind of a small storm would fall between the nodes.
const COARSEST_STEP = 0.12;

/** A regular net of longitude and latitude. */
export type Net = {
  /** Longitude of the first column and latitude of the first row [deg]; longitudes grow from there without a break. */
  readonly west: number;
  readonly south: number;
  readonly stepDeg: number;
  readonly nx: number;
  readonly ny: number;
  /** True when the storm may reach the gust floor outside the net too. */
  readonly isPartial: boolean;
};

/** Peak gusts on a net. */
export type FootprintGrid = Net & {
  /**
   * Peak 3-s gust without vortices, and median and ninth decile with them [m s⁻¹], shape (ny, nx), south row first. Below
   * 20 m/s a gust may be too low, and is NaN where the storm comes nowhere near 20 m/s.
   */
  readonly plain: Float64Array;
  readonly p50: Float64Array;
  readonly p90: Float64Array;
};

/**
 * What is kept of a node: a number made of its scores and of its peak in every draw, shape (264,).
 */
export type KeptOfNode = (scores: SiteScores, node: number, draws: Float64Array) => number;

/**
 * The net over the area where the storm can reach 20 m/s.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param options focus: rectangle of interest [deg], such as the bounds of the sites; mostNodes: size of the net.
 * @returns The net; null when the storm never reaches 20 m/s.
 * @throws {DomainError} when fewer than 100 nodes are allowed.
 * @source Product rule.
 */
export function footprintNet(
  storm: Storm,
  land: LandIndex,
  options: { readonly focus?: Area | null; readonly mostNodes?: number } = {},
): Net | null {
  const mostNodes = options.mostNodes ?? MOST_NODES;
  if (!(mostNodes >= 100)) throw new DomainError('number of nodes', mostNodes, 'at least 100');
  const area = strongWindArea(floorCircles(storm), land, options.focus ?? null, mostNodes * COARSEST_STEP ** 2);
  return area && { ...netOver(area, mostNodes), isPartial: area.isPartial };
}

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
  control: Omit<ScoreControl, 'onSite'> = {},
): FootprintGrid | null {
  const net = footprintNet(storm, land, options);
  return net && { ...net, ...fieldsOver(storm, land, net, FOOTPRINT, control) };
}

const FOOTPRINT = {
  plain: ({ plainGust }, node) => plainGust[node]!,
  p50: ({ p50 }, node) => p50[node]!,
  p90: ({ p90 }, node) => p90[node]!,
} satisfies Record<string, KeptOfNode>;

/**
 * Numbers at every node of a net: open country with its own fetch on land, open sea elsewhere.
 *
 * @param storm   The storm.
 * @param land    Land polygons.
 * @param net     The net.
 * @param kept    What is kept of each node, by name.
 * @param control Asked for stopping and told of finished nodes, block by block; stopped fields are not complete.
 * @returns By name what was kept, shape (ny, nx), south row first; NaN where the storm comes nowhere near 20 m/s.
 * @source scoreSites at every node.
 */
export function fieldsOver<Name extends string>(
  storm: Storm,
  land: LandIndex,
  net: Net,
  kept: Readonly<Record<Name, KeptOfNode>>,
  control: Omit<ScoreControl, 'onSite'> = {},
): Record<Name, Float64Array> {
  const { nx, ny, stepDeg } = net;
  const keepers = Object.entries<KeptOfNode>(kept).map(([name, keep]) => {
    return { name, keep, field: new Float64Array(nx * ny).fill(NaN) };
  });
  const fields = Object.fromEntries(keepers.map(({ name, field }) => [name, field])) as Record<Name, Float64Array>;
  const circles = floorCircles(storm);
  // Block by block, so that each is asked only about the hours in which the storm is near it.
  const side = Math.max(Math.round(BLOCK_DEG / stepDeg), 1);
  let done = 0;
  for (let j = 0; j < ny; j += side) {
    for (let i = 0; i < nx; i += side) {
      const block = { i, j, columns: Math.min(side, nx - i), rows: Math.min(side, ny - j) };
      const times = outerTimesOver(circles, areaOf(net, block));
      if (times) {
        if (control.shouldStop?.()) return fields;
        scoreSites(timesBetween(storm, ...times), nodesOf(net, block, land), REFERENCE_CURVE, {
          onSite: (n, scores, draws) => {
            const k = (j + Math.floor(n / block.columns)) * nx + i + (n % block.columns);
            for (const { keep, field } of keepers) field[k] = keep(scores, n, draws);
          },
        });
      }
      done += block.columns * block.rows;
      control.onProgress?.(done);
    }
  }
  return fields;
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

/** The finest net of at most so many nodes whose nodes lie on whole multiples of its step. */
function netOver(area: Area, mostNodes: number): Omit<Net, 'isPartial'> {
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
