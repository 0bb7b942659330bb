import { canLieIn, type Country } from './countries.ts';

/** A box on the globe; longitudes run east from `west`, which may pass the date line. */
export interface Box {
  south: number;
  north: number;
  west: number;
  east: number;
}

const ROOM_DEG = 3;
const FEWEST_POINTS = 4;

const quartile = (sorted: Float64Array, share: number) => sorted[Math.round((sorted.length - 1) * share)]!;

function span(values: Float64Array): [number, number] {
  const sorted = values.slice().sort();
  const low = quartile(sorted, 0.25);
  const high = quartile(sorted, 0.75);
  const room = Math.max(ROOM_DEG, 1.5 * (high - low));
  return [low - room, high + room];
}

/**
 * Where a file's sites lie: the middle half of its latitudes and longitudes with room around, so that a quarter of
 * slips on either side doesn't move it. Longitudes are also tried east of Greenwich round to it, for the date line.
 */
export function homeOf(latitudes: Float64Array, longitudes: Float64Array): Box | null {
  if (latitudes.length < FEWEST_POINTS) return null;
  const [south, north] = span(latitudes);
  const [west, east] = span(longitudes);
  const [west360, east360] = span(longitudes.map((longitude) => (longitude + 360) % 360));
  return east360 - west360 < east - west - 1e-9
    ? { south, north, west: west360, east: east360 }
    : { south, north, west, east };
}

const inHome = (home: Box, latitude: number, longitude: number): boolean =>
  latitude >= home.south &&
  latitude <= home.north &&
  (((longitude - home.west) % 360) + 360) % 360 <= home.east - home.west;

/** Whether a site may lie at a point: in its country when that is known, else among the file's other sites. */
export function plausible(
  home: Box | null,
  country: Country | null,
  latitude: number,
  longitude: number,
): boolean | null {
  if (Math.abs(latitude) > 90 || Math.abs(longitude) > 180) return false;
  if (country) return canLieIn(country, latitude, longitude);
  return home ? inHome(home, latitude, longitude) : null;
}

export type Slip = 'swapped' | 'sign lost' | null;

/**
 * The slip that explains coordinates which can't be right as they stand: a longitude with the wrong sign, or the two
 * swapped (with or without the sign). Judged by country and by the file's own region, so that a pair which is a valid
 * point elsewhere on the globe is found too.
 */
export function slipOf(home: Box | null, country: Country | null, latitude: number, longitude: number): Slip {
  if (latitude === 0 && longitude === 0) return null;
  const fits = (lat: number, lon: number) => plausible(home, country, lat, lon);
  if (fits(latitude, longitude) !== false) return null;
  if (fits(latitude, -longitude)) return 'sign lost';
  if (fits(longitude, latitude) || fits(longitude, -latitude)) return 'swapped';
  // With nothing to compare with, a latitude beyond the pole that would do as a longitude is still a swap.
  if (!country && !home && Math.abs(latitude) > 90 && Math.abs(latitude) <= 180 && Math.abs(longitude) <= 60)
    return 'swapped';
  return null;
}
