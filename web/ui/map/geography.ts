/** Small geography for what a map says in words; distances here are for reading, not for results. */
export type LonLat = readonly [longitude: number, latitude: number];

const EARTH_KM = 6371;
const radians = (degrees: number) => (degrees * Math.PI) / 180;

/** The same meridian, written within 180° of the reference: tracks may run past ±180. */
export const longitudeNear = (longitude: number, reference: number): number =>
  longitude + 360 * Math.round((reference - longitude) / 360);

export type Bounds = [west: number, south: number, east: number, north: number];

/** The box around points, continuous across the date line when the points are. */
export const boundsOf = (points: readonly LonLat[]): Bounds | null => {
  const first = points[0];
  if (!first) return null;
  let [west, south, east, north] = [first[0], first[1], first[0], first[1]];
  for (const [longitude, latitude] of points) {
    west = Math.min(west, longitude);
    east = Math.max(east, longitude);
    south = Math.min(south, latitude);
    north = Math.max(north, latitude);
  }
  return [west, south, east, north];
};

export const padBounds = ([west, south, east, north]: Bounds, share: number, leastDeg: number): Bounds => {
  const x = Math.max((east - west) * share, leastDeg);
  const y = Math.max((north - south) * share, leastDeg);
  return [west - x, Math.max(-85, south - y), east + x, Math.min(85, north + y)];
};

/** Radius of a circle on the ground as a ring of points. */
export const circleAround = ([longitude, latitude]: LonLat, radiusM: number, points = 48): [number, number][] => {
  const northDeg = (radiusM / 1000 / EARTH_KM) * (180 / Math.PI);
  const eastDeg = northDeg / Math.max(0.05, Math.cos(radians(latitude)));
  return Array.from({ length: points + 1 }, (_, index) => {
    const angle = (2 * Math.PI * index) / points;
    return [longitude + eastDeg * Math.sin(angle), latitude + northDeg * Math.cos(angle)];
  });
};

export interface TrackPlace {
  distanceKm: number;
  /** Seen along the way the storm goes. */
  side: 'left' | 'right';
}

/** Nearest distance to the track and the side of it. */
export const placeByTrack = (path: readonly LonLat[], [longitude, latitude]: LonLat): TrackPlace | null => {
  const kmPerDegNorth = EARTH_KM * radians(1);
  const kmPerDegEast = kmPerDegNorth * Math.cos(radians(latitude));
  let nearest: TrackPlace | null = null;
  for (let index = 1; index < path.length; index += 1) {
    const from = path[index - 1]!;
    const to = path[index]!;
    const ax = (longitudeNear(from[0], longitude) - longitude) * kmPerDegEast;
    const ay = (from[1] - latitude) * kmPerDegNorth;
    const dx = (to[0] - from[0]) * kmPerDegEast;
    const dy = (to[1] - from[1]) * kmPerDegNorth;
    const length = dx * dx + dy * dy;
    const along = length === 0 ? 0 : Math.min(1, Math.max(0, -(ax * dx + ay * dy) / length));
    const distanceKm = Math.hypot(ax + along * dx, ay + along * dy);
    if (!nearest || distanceKm < nearest.distanceKm)
      // The point lies left of the way when the cross product of the way and the line to it is positive.
      nearest = { distanceKm, side: dx * -ay - dy * -ax > 0 ? 'left' : 'right' };
  }
  return nearest;
};
