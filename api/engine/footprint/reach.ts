import { EARTH_RADIUS, REACH_LIMIT } from '../constants.ts';
import { unitVector, type Place } from '../geo/geodesy.ts';

/** Legs of a path prepared for many sites: unit vectors of start, end and of the leg's plane, 9 numbers a leg. */
export type ReachPath = Float64Array;

const COS_LIMIT = Math.cos(REACH_LIMIT / EARTH_RADIUS);
const SIN_LIMIT = Math.sin(REACH_LIMIT / EARTH_RADIUS);

/**
 * Prepares the legs of a track for the question which sites it reaches.
 *
 * @param fixes Places of the centre in order of time [deg].
 * @returns The legs; a single fix counts as a leg of no length.
 * @source Great-circle legs.
 */
export function reachPath(fixes: readonly Place[]): ReachPath {
  const legs = Math.max(fixes.length - 1, Math.min(fixes.length, 1));
  const path = new Float64Array(9 * legs);
  for (let i = 0; i < legs; i++) {
    const a = unitVector(fixes[i]!);
    const b = unitVector(fixes[Math.min(i + 1, fixes.length - 1)]!);
    const nx = a[1] * b[2] - a[2] * b[1];
    const ny = a[2] * b[0] - a[0] * b[2];
    const nz = a[0] * b[1] - a[1] * b[0];
    const length = Math.hypot(nx, ny, nz) || 1;
    path.set([...a, ...b, nx / length, ny / length, nz / length], 9 * i);
  }
  return path;
}

/**
 * Whether a site is farther than 1000 km from every leg of a track: not scored and not charged.
 *
 * @param path      Legs from reachPath.
 * @param latitude  Latitude of the site [deg].
 * @param longitude Longitude of the site [deg].
 * @returns True when out of reach; NaN coordinates are.
 * @source Distance from a great-circle leg: that of its plane where the foot lies on the leg, else of the nearer end.
 */
export function outOfReach(path: ReachPath, latitude: number, longitude: number): boolean {
  const [x, y, z] = unitVector({ latitude, longitude });
  for (let at = 0; at < path.length; at += 9) {
    const ax = path[at]!;
    const ay = path[at + 1]!;
    const az = path[at + 2]!;
    if (ax * x + ay * y + az * z >= COS_LIMIT) return false;
    const bx = path[at + 3]!;
    const by = path[at + 4]!;
    const bz = path[at + 5]!;
    if (bx * x + by * y + bz * z >= COS_LIMIT) return false;
    const nx = path[at + 6]!;
    const ny = path[at + 7]!;
    const nz = path[at + 8]!;
    if (Math.abs(nx * x + ny * y + nz * z) > SIN_LIMIT) continue;
    const afterStart = (ny * az - nz * ay) * x + (nz * ax - nx * az) * y + (nx * ay - ny * ax) * z;
    const beforeEnd = (by * nz - bz * ny) * x + (bz * nx - bx * nz) * y + (bx * ny - by * nx) * z;
    if (afterStart > 0 && beforeEnd > 0) return false;
  }
  return true;
}

/**
 * Number of sites a track reaches.
 *
 * @param path       Legs from reachPath.
 * @param latitudes  Latitudes [deg], shape (n,).
 * @param longitudes Longitudes [deg], shape (n,).
 * @returns Sites within reach.
 * @source outOfReach; quote and charge count with it alike.
 */
export function countWithinReach(path: ReachPath, latitudes: ArrayLike<number>, longitudes: ArrayLike<number>): number {
  let count = 0;
  for (let i = 0; i < latitudes.length; i++) if (!outOfReach(path, latitudes[i]!, longitudes[i]!)) count++;
  return count;
}
