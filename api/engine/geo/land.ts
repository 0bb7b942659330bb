import { EARTH_RADIUS } from '../constants.ts';
import { DomainError } from '../errors.ts';
import { degrees, radians } from '../units.ts';
import { betweenPlaces, greatCircleDistance, type Place } from './geodesy.ts';

const CELL_DEG = 0.25;
const COLUMNS = 1440;
const ROWS = 720;
// Reference points sit off the middle of their cell, where drawn or round coordinates seldom lie.
const REFERENCE_X = 0.48713;
const REFERENCE_Y = 0.51279;
// A great circle is followed in straight pieces of longitude and latitude; 4 km keeps them within 1 m up to 70 degrees.
const PIECE = 4_000;

/** Greatest overland distance looked for [m]. */
export const FETCH_LIMIT = 100_000;
/** Directions the wind comes from, in the order of the fetches [deg]. */
const FETCH_SECTORS = [0, 45, 90, 135, 180, 225, 270, 315] as const;

/** Coast segments sorted into cells of a quarter degree; plain data that can be sent to another thread. */
export type LandIndex = {
  /** Longitude and latitude of both ends, longitudes in any turn but continuous [deg], shape (n, 4). */
  readonly segments: Float64Array;
  /** 1 where a segment only closes a ring along a pole and is no coast, shape (n,). */
  readonly artificial: Uint8Array;
  /** First entry of each cell in cellSegments, row-major from the south-west, shape (cells + 1,). */
  readonly cellStart: Int32Array;
  readonly cellSegments: Int32Array;
  /** 1 where the reference point of the cell is on land, shape (cells,). */
  readonly cellOnLand: Uint8Array;
};

/**
 * Builds the index of the land polygons. A point is on land when an odd number of rings contain it, so a lake is simply
 * another ring.
 *
 * @param rings Closed rings as flat longitude, latitude pairs [deg], longitudes continuous along the ring.
 * @returns The index.
 * @throws {DomainError} when a ring is not closed, leaves the latitudes or steps by more than 180 degrees.
 * @source Even-odd rule; cells as an acceleration only.
 */
export function buildLandIndex(rings: readonly Float64Array[]): LandIndex {
  let count = 0;
  for (const ring of rings) count += ring.length / 2 - 1;
  const segments = new Float64Array(4 * count);
  const artificial = new Uint8Array(count);
  const crossings: number[][] = Array.from({ length: ROWS }, () => []);
  const startsInside = new Uint8Array(ROWS);
  let at = 0;
  for (const ring of rings) {
    const end = ring.length - 2;
    if (ring.length < 8 || ring[0] !== ring[end] || ring[1] !== ring[end + 1]) {
      throw new DomainError('ring', `${ring.length / 2} points`, 'closed, with at least 4 points');
    }
    for (let i = 0; i < end; i += 2) {
      const x0 = ring[i]!;
      const y0 = ring[i + 1]!;
      const x1 = ring[i + 2]!;
      const y1 = ring[i + 3]!;
      const polar = Math.abs(y0) === 90 || Math.abs(y1) === 90;
      if (!(Math.abs(y0) <= 90)) throw new DomainError('ring latitude', y0, 'in [-90, 90]');
      if (!(polar || Math.abs(x1 - x0) <= 180))
        throw new DomainError('ring step', `${x0} to ${x1}`, 'at most 180 degrees');
      segments[4 * at] = x0;
      segments[4 * at + 1] = y0;
      segments[4 * at + 2] = x1;
      segments[4 * at + 3] = y1;
      artificial[at] = polar ? 1 : 0;
      at++;
      const low = Math.min(y0, y1);
      const high = Math.max(y0, y1);
      for (let row = Math.max(rowOf(low) - 1, 0); row <= rowOf(high); row++) {
        const y = -90 + (row + REFERENCE_Y) * CELL_DEG;
        if (y0 <= y === y1 <= y) continue;
        const x = x0 + ((y - y0) * (x1 - x0)) / (y1 - y0);
        const turn = Math.floor((x + 180) / 360);
        crossings[row]!.push(x - 360 * turn);
        if (turn & 1) startsInside[row]! ^= 1;
      }
    }
  }
  const cellOnLand = new Uint8Array(ROWS * COLUMNS);
  for (let row = 0; row < ROWS; row++) {
    const sorted = Float64Array.from(crossings[row]!).sort();
    let passed = 0;
    for (let column = 0; column < COLUMNS; column++) {
      const x = -180 + (column + REFERENCE_X) * CELL_DEG;
      while (passed < sorted.length && sorted[passed]! < x) passed++;
      cellOnLand[row * COLUMNS + column] = (passed + startsInside[row]!) & 1;
    }
  }
  return { segments, artificial, cellOnLand, ...sortIntoCells(segments, count) };
}

function sortIntoCells(segments: Float64Array, count: number): { cellStart: Int32Array; cellSegments: Int32Array } {
  const cellStart = new Int32Array(ROWS * COLUMNS + 1);
  const cells: number[] = [];
  for (let s = 0; s < count; s++) {
    cells.length = 0;
    cellsOfSegment(segments, s, cells);
    for (const cell of cells) cellStart[cell + 1]!++;
  }
  for (let c = 0; c < ROWS * COLUMNS; c++) cellStart[c + 1]! += cellStart[c]!;
  const cellSegments = new Int32Array(cellStart[ROWS * COLUMNS]!);
  const next = cellStart.slice();
  for (let s = 0; s < count; s++) {
    cells.length = 0;
    cellsOfSegment(segments, s, cells);
    for (const cell of cells) cellSegments[next[cell]!++] = s;
  }
  return { cellStart, cellSegments };
}

function cellsOfSegment(segments: Float64Array, s: number, out: number[]): void {
  const x0 = segments[4 * s]!;
  const y0 = segments[4 * s + 1]!;
  const x1 = segments[4 * s + 2]!;
  const y1 = segments[4 * s + 3]!;
  const firstRow = rowOf(Math.min(y0, y1));
  const lastRow = rowOf(Math.max(y0, y1));
  for (let row = firstRow; row <= lastRow; row++) {
    let west = Math.min(x0, x1);
    let east = Math.max(x0, x1);
    if (firstRow !== lastRow) {
      // Only the part of the segment inside this row.
      const south = Math.max(-90 + row * CELL_DEG, Math.min(y0, y1));
      const north = Math.min(-90 + (row + 1) * CELL_DEG, Math.max(y0, y1));
      const a = x0 + ((south - y0) * (x1 - x0)) / (y1 - y0);
      const b = x0 + ((north - y0) * (x1 - x0)) / (y1 - y0);
      west = Math.max(west, Math.min(a, b) - 1e-9);
      east = Math.min(east, Math.max(a, b) + 1e-9);
    }
    const first = Math.floor((west + 180) / CELL_DEG);
    const last = Math.min(Math.floor((east + 180) / CELL_DEG), first + COLUMNS - 1);
    for (let column = first; column <= last; column++) out.push(row * COLUMNS + wrapColumn(column));
  }
}

/**
 * Whether a point is on land.
 *
 * @param index     Land index.
 * @param latitude  Latitude [deg], -90..90.
 * @param longitude Longitude [deg], any range.
 * @returns True on land. Points within rounding of the coast may fall on either side. False for NaN.
 * @source Even-odd rule, counted from the reference point of the cell.
 */
export function isLand(index: LandIndex, latitude: number, longitude: number): boolean {
  if (!(Math.abs(latitude) <= 90) || !Number.isFinite(longitude)) return false;
  const { segments, cellStart, cellSegments } = index;
  const lon = longitude - 360 * Math.floor((longitude + 180) / 360);
  const row = rowOf(latitude);
  const column = wrapColumn(Math.floor((lon + 180) / CELL_DEG));
  const cell = row * COLUMNS + column;
  let odd = index.cellOnLand[cell]!;
  const refX = (column + REFERENCE_X) * CELL_DEG - 180 - lon;
  const refY = -90 + (row + REFERENCE_Y) * CELL_DEG;
  // From the point east or west to the meridian of the reference point, then along it; x is relative to the point.
  for (let k = cellStart[cell]!; k < cellStart[cell + 1]!; k++) {
    const s = 4 * cellSegments[k]!;
    const x0 = nearest(segments[s]! - lon);
    const x1 = x0 + segments[s + 2]! - segments[s]!;
    const y0 = segments[s + 1]!;
    const y1 = segments[s + 3]!;
    if (y0 <= latitude !== y1 <= latitude) {
      const x = x0 + ((latitude - y0) * (x1 - x0)) / (y1 - y0);
      if (x <= 0 !== x <= refX) odd ^= 1;
    }
    if (x0 <= refX !== x1 <= refX) {
      const y = y0 + ((refX - x0) * (y1 - y0)) / (x1 - x0);
      if (y <= latitude !== y <= refY) odd ^= 1;
    }
  }
  return odd === 1;
}

/**
 * Overland distance to the coast upwind of a site for wind from each of eight directions.
 *
 * @param index     Land index.
 * @param latitude  Site latitude [deg].
 * @param longitude Site longitude [deg].
 * @param out       Receives the distance [m] for wind FROM 0, 45, ..., 315 degrees, shape (8,) from `offset`; 0 at a
 *                  site outside the polygons, at most FETCH_LIMIT.
 * @param offset    Where in `out` to start.
 * @returns `out`.
 * @source First crossing of a land polygon's edge along the great circle that leaves the site towards the wind.
 */
export function fetchBySector(
  index: LandIndex,
  latitude: number,
  longitude: number,
  out: Float64Array,
  offset = 0,
): Float64Array {
  // No ray can meet the coast before the nearest coast, so all of them start that far out.
  const clear = -distanceToLandM(index, latitude, longitude);
  for (let k = 0; k < FETCH_SECTORS.length; k++) {
    out[offset + k] = clear < 0 ? 0 : distanceAlong(index, latitude, longitude, FETCH_SECTORS[k]!, clear);
  }
  return out;
}

/** Distance to the first coast met along a bearing, at most FETCH_LIMIT, when there is none nearer than `clear`. */
function distanceAlong(index: LandIndex, latitude: number, longitude: number, bearing: number, clear: number): number {
  if (clear > FETCH_LIMIT) return FETCH_LIMIT;
  const phi = radians(latitude);
  const sinPhi = Math.sin(phi);
  const cosPhi = Math.cos(phi);
  const sinB = Math.sin(radians(bearing));
  const cosB = Math.cos(radians(bearing));
  let lat = latitude;
  let east = 0;
  // One piece less than the clear distance allows: a cut edge is known to some metres only.
  const skipped = Math.max(Math.min(Math.floor(clear / PIECE), FETCH_LIMIT / PIECE) - 1, 0);
  for (let piece = skipped; piece * PIECE <= FETCH_LIMIT; piece++) {
    const c = (piece * PIECE) / EARTH_RADIUS;
    const sinC = Math.sin(c);
    const cosC = Math.cos(c);
    const sinLat = sinPhi * cosC + cosPhi * sinC * cosB;
    const x = cosPhi * cosC - sinPhi * sinC * cosB;
    const nextLat = degrees(Math.atan2(sinLat, Math.hypot(sinC * sinB, x)));
    const nextEast = degrees(Math.atan2(sinC * sinB, x));
    if (piece > skipped) {
      const share = firstCrossing(index, longitude + east, lat, nearest(nextEast - east), nextLat - lat);
      if (share <= 1) return (piece - 1 + share) * PIECE;
    }
    lat = nextLat;
    east = nextEast;
  }
  return FETCH_LIMIT;
}

/** Share of the straight piece from (x, y) by (dx, dy) at which it first meets a coast; Infinity when it meets none. */
function firstCrossing(index: LandIndex, x: number, y: number, dx: number, dy: number): number {
  const { segments, artificial, cellStart, cellSegments } = index;
  const firstRow = rowOf(Math.min(y, y + dy));
  const lastRow = rowOf(Math.max(y, y + dy));
  const firstColumn = Math.floor((Math.min(x, x + dx) + 180) / CELL_DEG);
  const lastColumn = Math.floor((Math.max(x, x + dx) + 180) / CELL_DEG);
  let first = Infinity;
  for (let row = firstRow; row <= lastRow; row++) {
    for (let column = firstColumn; column <= lastColumn; column++) {
      const cell = row * COLUMNS + wrapColumn(column);
      for (let k = cellStart[cell]!; k < cellStart[cell + 1]!; k++) {
        const segment = cellSegments[k]!;
        const s = 4 * segment;
        const ex = segments[s + 2]! - segments[s]!;
        const ey = segments[s + 3]! - segments[s + 1]!;
        const cross = dx * ey - dy * ex;
        if (cross === 0 || artificial[segment] === 1) continue;
        const fx = nearest(segments[s]! - x);
        const fy = segments[s + 1]! - y;
        const along = (fx * ey - fy * ex) / cross;
        if (!(along >= 0 && along <= 1 && along < first)) continue;
        const across = (fx * dy - fy * dx) / cross;
        // A hair of tolerance, so that a piece cannot slip out through a vertex.
        if (across >= -1e-12 && across <= 1 + 1e-12) first = along;
      }
    }
  }
  return first;
}

/**
 * Distance from a point to the nearest coast, positive at sea and negative on land.
 *
 * @param index     Land index.
 * @param latitude  Latitude [deg].
 * @param longitude Longitude [deg].
 * @param reach     Greatest distance looked for [m], above 0.
 * @returns Signed distance [m]; Infinity at sea and -Infinity on land when no coast lies within reach.
 * @source Orthographic projection about the point: planar distance to a segment, then the arc of its sine.
 */
export function distanceToLandM(index: LandIndex, latitude: number, longitude: number, reach = FETCH_LIMIT): number {
  const { segments, artificial, cellStart, cellSegments } = index;
  const sinPhi = Math.sin(radians(latitude));
  const cosPhi = Math.cos(radians(latitude));
  const reachDeg = degrees(reach / EARTH_RADIUS);
  // Widest meridian difference of a circle of this radius; a circle around a pole meets every meridian.
  const ratio = Math.sin(radians(reachDeg)) / cosPhi;
  const spread = ratio < 1 && Math.abs(latitude) + reachDeg < 90 ? degrees(Math.asin(ratio)) : 180;
  const firstRow = rowOf(Math.max(latitude - reachDeg, -90));
  const lastRow = rowOf(Math.min(latitude + reachDeg, 90));
  const firstColumn = Math.floor((longitude - spread + 180) / CELL_DEG);
  const lastColumn = Math.min(Math.floor((longitude + spread + 180) / CELL_DEG), firstColumn + COLUMNS - 1);
  let best = Math.sin(radians(reachDeg)) ** 2;
  let found = false;
  for (let row = firstRow; row <= lastRow; row++) {
    for (let column = firstColumn; column <= lastColumn; column++) {
      const cell = row * COLUMNS + wrapColumn(column);
      for (let k = cellStart[cell]!; k < cellStart[cell + 1]!; k++) {
        const segment = cellSegments[k]!;
        if (artificial[segment] === 1) continue;
        const s = 4 * segment;
        const dx = segments[s + 2]! - segments[s]!;
        const dy = segments[s + 3]! - segments[s + 1]!;
        let from = 0;
        let to = 1;
        if (Math.abs(dx) > CELL_DEG || Math.abs(dy) > CELL_DEG) {
          // A long edge is straight in longitude and latitude, not in the projection: take only its part near this cell.
          const west = nearest(-180 + column * CELL_DEG - segments[s]!);
          const south = -90 + row * CELL_DEG - segments[s + 1]!;
          const inX = shareWithin(west, west + CELL_DEG, dx);
          const inY = shareWithin(south, south + CELL_DEG, dy);
          from = Math.max(inX[0], inY[0]);
          to = Math.min(inX[1], inY[1]);
          if (from > to) continue;
        }
        const east = segments[s]! - longitude;
        const a = orthographic(east + from * dx, segments[s + 1]! + from * dy, sinPhi, cosPhi);
        const b = orthographic(east + to * dx, segments[s + 1]! + to * dy, sinPhi, cosPhi);
        const ex = b.x - a.x;
        const ey = b.y - a.y;
        const length = ex * ex + ey * ey;
        const share = length === 0 ? 0 : Math.min(Math.max(-(a.x * ex + a.y * ey) / length, 0), 1);
        const square = (a.x + share * ex) ** 2 + (a.y + share * ey) ** 2;
        if (square <= best) {
          best = square;
          found = true;
        }
      }
    }
  }
  const distance = found ? EARTH_RADIUS * Math.asin(Math.sqrt(best)) : Infinity;
  return isLand(index, latitude, longitude) ? -distance : distance;
}

/** Shares of a run from 0 to `step` that lie between low and high, a hair wider so that neighbouring parts meet. */
function shareWithin(low: number, high: number, step: number): [number, number] {
  if (step === 0) return low <= 0 && high >= 0 ? [0, 1] : [1, 0];
  const a = low / step;
  const b = high / step;
  return [Math.max(Math.min(a, b) - 1e-9, 0), Math.min(Math.max(a, b) + 1e-9, 1)];
}

function orthographic(east: number, latitude: number, sinPhi: number, cosPhi: number): { x: number; y: number } {
  const sinLat = Math.sin(radians(latitude));
  const cosLat = Math.cos(radians(latitude));
  const cosEast = Math.cos(radians(east));
  return { x: cosLat * Math.sin(radians(east)), y: sinLat * cosPhi - cosLat * sinPhi * cosEast };
}

/** Time over land, from entering to leaving [s]. */
export type InlandSpell = { readonly enterS: number; readonly leaveS: number };

/**
 * The times a storm centre spends over land, with the moments it crosses the coast.
 *
 * @param index Land index.
 * @param path  Fixes in order of strictly increasing time: time [s], latitude and longitude [deg].
 * @returns Spells in order of time; one that begins at the first fix means the track starts over land.
 * @source Great-circle legs at constant speed, crossed with the land polygons' edges.
 */
export function inlandSpells(
  index: LandIndex,
  path: readonly { readonly timeS: number; readonly latitude: number; readonly longitude: number }[],
): InlandSpell[] {
  const spells: { enterS: number; leaveS: number }[] = [];
  for (let leg = 0; leg + 1 < path.length; leg++) {
    const a = path[leg]!;
    const b = path[leg + 1]!;
    const duration = b.timeS - a.timeS;
    const shares = coastShares(index, a, b);
    for (let k = 0; k + 1 < shares.length; k++) {
      const from = shares[k]!;
      const to = shares[k + 1]!;
      const middle = betweenPlaces(a, b, (from + to) / 2);
      if (!isLand(index, middle.latitude, middle.longitude)) continue;
      const enterS = a.timeS + from * duration;
      const leaveS = to === 1 ? b.timeS : a.timeS + to * duration;
      const last = spells[spells.length - 1];
      if (last && last.leaveS === enterS) last.leaveS = leaveS;
      else spells.push({ enterS, leaveS });
    }
  }
  return spells;
}

/**
 * Hours since the centre last crossed from sea onto land.
 *
 * @param spells Times over land from inlandSpells.
 * @param timeS  Time [s] on the same clock.
 * @returns Hours [h]; 0 over water.
 * @source Definition.
 */
export function inlandHours(spells: readonly InlandSpell[], timeS: number): number {
  for (const { enterS, leaveS } of spells) {
    if (timeS >= enterS && timeS <= leaveS) return (timeS - enterS) / 3600;
  }
  return 0;
}

/** 0, the shares of a leg at which it crosses a coast in ascending order, and 1. */
function coastShares(index: LandIndex, a: Place, b: Place): number[] {
  const shares = [0];
  const distance = greatCircleDistance(a, b);
  const pieces = Math.max(Math.ceil(distance / PIECE), 1);
  let from = a;
  for (let p = 1; p <= pieces; p++) {
    const to = p === pieces ? b : betweenPlaces(a, b, p / pieces);
    const dx = nearest(to.longitude - from.longitude);
    const dy = to.latitude - from.latitude;
    // Step over each crossing of the piece in turn.
    let done = 0;
    for (;;) {
      const rest = 1 - done;
      const share = firstCrossing(index, from.longitude + done * dx, from.latitude + done * dy, rest * dx, rest * dy);
      if (share > 1) break;
      const at = done + share * rest;
      shares.push((p - 1 + at) / pieces);
      done = at + 1e-6;
      if (done >= 1) break;
    }
    from = to;
  }
  shares.push(1);
  return shares.filter((share, k) => k === 0 || share > shares[k - 1]!);
}

function rowOf(latitude: number): number {
  return Math.min(Math.max(Math.floor((latitude + 90) / CELL_DEG), 0), ROWS - 1);
}

function wrapColumn(column: number): number {
  return ((column % COLUMNS) + COLUMNS) % COLUMNS;
}

/** The same longitude difference within -180..180. */
function nearest(difference: number): number {
  return difference - 360 * Math.round(difference / 360);
}
