import { EARTH_RADIUS, GUST_FLOOR } from '../constants.ts';
import { distanceToLandM, type LandIndex } from '../geo/land.ts';
import { usesDefaultGround } from '../track/options.ts';
import { fieldAt, STATE, STATE_SIZE, type Storm } from '../track/storm.ts';
import { degrees, radians } from '../units.ts';
import { seaWindOf } from '../winds/sea-wind.ts';
import { exposureOf } from './exposure.ts';
import { groundOf } from './ground.ts';

/** Rectangle in longitude and latitude [deg]; longitudes continuous, so east may exceed 180. */
export type Area = { readonly west: number; readonly south: number; readonly east: number; readonly north: number };

/** Where a footprint is worth drawing. */
export type StrongWindArea = Area & {
  /** True when the storm may reach the gust floor outside the rectangle too. */
  readonly isPartial: boolean;
};

// Peak 3-s gust over the 10-min mean at sea near the floor; over land the mean falls by more than the factor rises.
const GUST_OVER_MEAN = 1.25;
/** Open country [m]: what the grid takes for every land node. */
const LAND_ROUGHNESS = 0.03;
const SEARCH_LIMIT = 1_000_000;
const FOCUS_MARGIN_DEG = 1;
// Half an hour of the strongest storms is some 50 km, well inside the radius of the floor.
const SPACING_S = 1800;

/**
 * The rectangle in which a storm's plain gust can reach the floor of 20 m/s: near the focus when there is one and the
 * storm reaches it, else everywhere or, where that exceeds `mostArea`, near land. What still exceeds it is cut down to the
 * part around the strongest wind.
 *
 * @param circles  Circles from floorCircles.
 * @param land     Land polygons.
 * @param focus    Rectangle of interest [deg], null for none.
 * @param mostArea Greatest area wanted [deg²], above 0.
 * @returns The rectangle; null when the storm never reaches the floor.
 * @source Product rule.
 */
export function strongWindArea(
  circles: readonly FloorCircle[],
  land: LandIndex,
  focus: Area | null,
  mostArea: number,
): StrongWindArea | null {
  if (circles.length === 0) return null;
  const wide = focus && grown(focus, FOCUS_MARGIN_DEG);
  const near = wide
    ? circles.flatMap((circle) => {
        const part = common(circle.area, wide);
        return part ? [{ ...circle, area: part }] : [];
      })
    : [];
  const isAffordable = size(circles.map((circle) => circle.area).reduce(hull)) <= mostArea;
  const ashore = isAffordable ? [] : circles.filter((circle) => reachesLand(circle, land));
  const wanted = [near, ashore, circles].find((list) => list.length > 0)!;
  let strongest = 0;
  wanted.forEach(({ wind }, k) => {
    if (wind > wanted[strongest]!.wind) strongest = k;
  });
  let first = strongest;
  let last = strongest;
  let area = wanted[strongest]!.area;
  // Grow along the track in both directions, evenly, as long as the rectangle stays affordable.
  for (let canGrow = true; canGrow;) {
    canGrow = false;
    for (const next of [first - 1, last + 1]) {
      const circle = wanted[next];
      if (!circle) continue;
      const larger = hull(area, circle.area);
      if (size(larger) > mostArea) continue;
      area = larger;
      if (next < first) first = next;
      else last = next;
      canGrow = true;
    }
  }
  return { ...area, isPartial: circles.some((circle) => size(hull(area, circle.area)) > size(area)) };
}

/**
 * The times between which the storm can reach the floor inside a rectangle.
 *
 * @param circles Circles from floorCircles.
 * @param area    The rectangle [deg].
 * @returns First and last position in Storm.outer; null when it never does.
 * @source Circles that meet the rectangle, and one more on either side.
 */
export function outerTimesOver(circles: readonly FloorCircle[], area: Area): [number, number] | null {
  const meeting = circles.filter((circle) => common(circle.area, area));
  return meeting.length === 0 ? null : [meeting[0]!.previous, meeting[meeting.length - 1]!.next];
}

/** Circle around the centre at one time, within which the plain gust can reach the floor. */
export type FloorCircle = {
  /** [deg] */
  readonly latitude: number;
  /** [deg], continuous along the track. */
  readonly longitude: number;
  /** [m] */
  readonly radius: number;
  /** Strongest 10-min mean over the sea [m s⁻¹]. */
  readonly wind: number;
  /** Rectangle around the circle. */
  readonly area: Area;
  /** Positions in Storm.outer of the times looked at before and after this one. */
  readonly previous: number;
  readonly next: number;
};

/**
 * Circles around the centre within which the gust can reach the floor, every half hour.
 *
 * @param storm The storm.
 * @returns Circles in order of time; none where the storm is too weak.
 * @source Symmetric vortex plus the whole motion wind, times a gust factor that is not exceeded near the floor.
 */
export function floorCircles(storm: Storm): FloorCircle[] {
  const circles: FloorCircle[] = [];
  const times = timesLookedAt(storm);
  const { bound } = seaWindOf(storm.options);
  const overMean = usesDefaultGround(storm.options) ? GUST_OVER_MEAN : greatestOverMean(storm);
  let lastLongitude: number | null = null;
  times.forEach((position, k) => {
    const at = storm.outer[position]! * STATE_SIZE;
    const latitude = storm.states[at + STATE.latitude]!;
    let longitude = storm.states[at + STATE.longitude]!;
    if (lastLongitude !== null) longitude += 360 * Math.round((lastLongitude - longitude) / 360);
    lastLongitude = longitude;
    const rMax = storm.states[at + STATE.rMax]!;
    const field = fieldAt(storm, storm.outer[position]!);
    const mean = (r: number) => bound(field, r);
    const wind = mean(rMax);
    if (overMean * wind < GUST_FLOOR) return;
    let radius = rMax;
    let beyond = SEARCH_LIMIT;
    for (let k = 0; k < 30; k++) {
      const middle = (radius + beyond) / 2;
      if (overMean * mean(middle) >= GUST_FLOOR) radius = middle;
      else beyond = middle;
    }
    const dLat = degrees(radius / EARTH_RADIUS);
    const dLon = dLat / Math.max(Math.cos(radians(Math.min(Math.abs(latitude) + dLat, 85))), 0.08);
    const area = {
      west: longitude - dLon,
      south: Math.max(latitude - dLat, -89),
      east: longitude + dLon,
      north: Math.min(latitude + dLat, 89),
    };
    const previous = times[Math.max(k - 1, 0)]!;
    const next = times[Math.min(k + 1, times.length - 1)]!;
    circles.push({ latitude, longitude, radius, wind, area, previous, next });
  });
  return circles;
}

/** The same factor for a chosen ground, at sea or over open country. */
function greatestOverMean(storm: Storm): number {
  const { greatestFactor } = groundOf(storm.options);
  const f = 2 * storm.states[STATE.halfF]!;
  const nowhere = new Array<number>(8).fill(0);
  const over = (roughness: number) =>
    greatestFactor(exposureOf('the grid', roughness, nowhere, 0, 1, new Float64Array(8)), f);
  return Math.max(over(NaN), over(LAND_ROUGHNESS));
}

/** Positions in Storm.outer of the first and last time and of times at least SPACING_S apart between them. */
function timesLookedAt(storm: Storm): number[] {
  const positions: number[] = [];
  const last = storm.outer.length - 1;
  let lastTime = -Infinity;
  for (let position = 0; position <= last; position++) {
    const timeS = storm.states[storm.outer[position]! * STATE_SIZE + STATE.timeS]!;
    if (position < last && timeS < lastTime + SPACING_S) continue;
    positions.push(position);
    lastTime = timeS;
  }
  return positions;
}

function reachesLand({ latitude, longitude, radius }: FloorCircle, land: LandIndex): boolean {
  return distanceToLandM(land, latitude, longitude, radius) < radius;
}

function grown({ west, south, east, north }: Area, margin: number): Area {
  return { west: west - margin, south: south - margin, east: east + margin, north: north + margin };
}

function size({ west, south, east, north }: Area): number {
  return (east - west) * (north - south);
}

function hull(a: Area, b: Area): Area {
  return {
    west: Math.min(a.west, b.west),
    south: Math.min(a.south, b.south),
    east: Math.max(a.east, b.east),
    north: Math.max(a.north, b.north),
  };
}

/** Common part of a rectangle and another that may be drawn whole turns away; null when there is none. */
function common(area: Area, other: Area): Area | null {
  const turn = 360 * Math.round((area.west + area.east - other.west - other.east) / 720);
  const west = Math.max(area.west, other.west + turn);
  const east = Math.min(area.east, other.east + turn);
  const south = Math.max(area.south, other.south);
  const north = Math.min(area.north, other.north);
  return west < east && south < north ? { west, south, east, north } : null;
}
