import { DomainError } from '../errors.ts';

/**
 * Lays a ring drawn on the sphere out on the flat longitude-latitude plane: no step in longitude exceeds 180 degrees,
 * and a ring around a pole is closed along that pole.
 *
 * @param points Ring as longitude, latitude pairs [deg], first and last point equal (modulo 360 in longitude).
 * @returns Flat pairs of longitude (continuous, any range) and latitude [deg], first and last pair identical.
 * @throws {DomainError} when fewer than three different points are given or one is not finite.
 * @source Definition; polygons stitched across the antimeridian need it before any planar test.
 */
export function unwrapRing(points: readonly (readonly number[])[]): Float64Array {
  if (points.length < 4)
    throw new DomainError('ring', `${points.length} points`, 'at least 4 points, the last equal to the first');
  const count = points.length;
  const flat = new Float64Array(2 * count);
  let shift = 0;
  let previous = 0;
  let latitudes = 0;
  for (let i = 0; i < count; i++) {
    const longitude = points[i]![0]!;
    const latitude = points[i]![1]!;
    if (!Number.isFinite(longitude) || !Number.isFinite(latitude)) {
      throw new DomainError('ring point', `${longitude}, ${latitude}`, 'two finite numbers');
    }
    if (i > 0 && Math.abs(longitude - previous) > 180) shift -= 360 * Math.round((longitude - previous) / 360);
    previous = longitude;
    latitudes += latitude;
    flat[2 * i] = longitude + shift;
    flat[2 * i + 1] = latitude;
  }
  const startX = flat[0]!;
  const startY = flat[1]!;
  const endX = flat[2 * count - 2]!;
  if (Math.round((endX - startX) / 360) !== 0) {
    const pole = latitudes < 0 ? -90 : 90;
    const closed = new Float64Array(2 * count + 6);
    closed.set(flat);
    closed.set([endX, pole, startX, pole, startX, startY], 2 * count);
    return closed;
  }
  flat[2 * count - 2] = startX;
  flat[2 * count - 1] = startY;
  return flat;
}
