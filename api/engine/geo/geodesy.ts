import { EARTH_RADIUS } from '../constants.ts';
import { degrees, radians } from '../units.ts';

/** A place on the sphere: latitude [deg], positive north; longitude [deg], any turn. */
export type Place = { readonly latitude: number; readonly longitude: number };

/**
 * Great-circle distance on the sphere.
 *
 * @param a First place [deg].
 * @param b Second place [deg].
 * @returns Distance [m], 0..half the circumference; unchanged by whole turns of longitude. NaN for NaN.
 * @source Haversine formula; differs from the ellipsoid by up to 0.5 %.
 */
export function greatCircleDistance(a: Place, b: Place): number {
  const phiA = radians(a.latitude);
  const phiB = radians(b.latitude);
  const sinPhi = Math.sin((phiB - phiA) / 2);
  const sinLambda = Math.sin(radians(b.longitude - a.longitude) / 2);
  const h = sinPhi * sinPhi + Math.cos(phiA) * Math.cos(phiB) * sinLambda * sinLambda;
  return 2 * EARTH_RADIUS * Math.asin(Math.min(1, Math.sqrt(h)));
}

/**
 * Direction in which the great circle from one place to another starts.
 *
 * @param a Starting place [deg].
 * @param b Target [deg].
 * @returns Bearing TOWARDS the target, clockwise from north [deg], 0 ≤ bearing < 360; 0 when the places coincide.
 * @source Spherical trigonometry.
 */
export function initialBearing(a: Place, b: Place): number {
  const phiA = radians(a.latitude);
  const phiB = radians(b.latitude);
  const lambda = radians(b.longitude - a.longitude);
  const east = Math.sin(lambda) * Math.cos(phiB);
  const north = Math.cos(phiA) * Math.sin(phiB) - Math.sin(phiA) * Math.cos(phiB) * Math.cos(lambda);
  return normalisedBearing(degrees(Math.atan2(east, north)));
}

/**
 * Brings a bearing into the range 0 ≤ bearing < 360.
 *
 * @param bearing Any bearing [deg].
 * @returns The same direction [deg].
 * @source Definition.
 */
export function normalisedBearing(bearing: number): number {
  const rest = bearing % 360;
  // A tiny negative rest plus 360 rounds to 360 itself.
  return rest < 0 ? (rest + 360) % 360 : rest;
}

/**
 * Unit vector of a place: x to 0 N 0 E, y to 0 N 90 E, z to the north pole.
 *
 * @param place The place [deg].
 * @returns Components [1].
 * @source Definition.
 */
export function unitVector(place: Place): [number, number, number] {
  const phi = radians(place.latitude);
  const lambda = radians(place.longitude);
  const c = Math.cos(phi);
  return [c * Math.cos(lambda), c * Math.sin(lambda), Math.sin(phi)];
}

/**
 * Place on the great circle between two places; vectors are interpolated, so neither pole nor antimeridian is special.
 *
 * @param a     Place at share 0 [deg].
 * @param b     Place at share 1 [deg].
 * @param share Part of the way [1].
 * @returns The place, longitude in (-180, 180] [deg]; `a` when the two coincide.
 * @source Spherical linear interpolation (Shoemake 1985).
 */
export function betweenPlaces(a: Place, b: Place, share: number): Place {
  const angle = greatCircleDistance(a, b) / EARTH_RADIUS;
  if (angle < 1e-12) return { latitude: a.latitude, longitude: a.longitude };
  const wa = Math.sin((1 - share) * angle) / Math.sin(angle);
  const wb = Math.sin(share * angle) / Math.sin(angle);
  const [ax, ay, az] = unitVector(a);
  const [bx, by, bz] = unitVector(b);
  const x = wa * ax + wb * bx;
  const y = wa * ay + wb * by;
  return {
    latitude: degrees(Math.atan2(wa * az + wb * bz, Math.hypot(x, y))),
    longitude: degrees(Math.atan2(y, x)),
  };
}

/**
 * Place reached along a great circle.
 *
 * @param from     Starting place [deg].
 * @param bearing  Bearing at the start, clockwise from north [deg].
 * @param distance Way along the great circle [m]; negative goes the other way.
 * @returns The place, longitude in (-180, 180] [deg].
 * @source Spherical trigonometry (direct geodesic on the sphere).
 */
export function destination(from: Place, bearing: number, distance: number): Place {
  const phi = radians(from.latitude);
  const theta = radians(bearing);
  const delta = distance / EARTH_RADIUS;
  const sinPhi = Math.sin(phi) * Math.cos(delta) + Math.cos(phi) * Math.sin(delta) * Math.cos(theta);
  const east = Math.sin(theta) * Math.sin(delta) * Math.cos(phi);
  const ahead = Math.cos(delta) - Math.sin(phi) * sinPhi;
  const longitude = from.longitude + degrees(Math.atan2(east, ahead));
  return {
    latitude: degrees(Math.asin(Math.min(1, Math.max(-1, sinPhi)))),
    longitude: longitude - 360 * Math.ceil((longitude - 180) / 360),
  };
}
