import type {
  Feature,
  FeatureCollection,
  LineString,
  MultiLineString,
  MultiPolygon,
  Point,
  Polygon,
  Position,
} from 'geojson';
import { clock, shortDay } from '../../lib/dates.ts';
import { count } from '../../lib/numbers.ts';
import { chanceToken, differenceToken, gustToken } from '../charts/gust-scale.ts';
import { circleAround, longitudeNear, type Bounds, type LonLat } from './geography.ts';
import type { LandPolygons } from './land.ts';
import {
  leadingGust,
  sizeClass,
  type CountCell,
  type MapBands,
  type MapSites,
  type MapTrack,
  type TrackTime,
} from './map-data.ts';
import type { MapTokens } from './map-tokens.ts';

const collection = <G extends Point | LineString | MultiLineString | Polygon | MultiPolygon>(
  features: Feature<G>[],
): FeatureCollection<G> => ({ type: 'FeatureCollection', features });
const pointAt = ([longitude, latitude]: LonLat, properties: Record<string, unknown>): Feature<Point> => ({
  type: 'Feature',
  properties,
  geometry: { type: 'Point', coordinates: [longitude, latitude] },
});
const copy = ([longitude, latitude]: LonLat): [number, number] => [longitude, latitude];

export const landFeatures = (land: LandPolygons) =>
  collection<Polygon>(
    land.map((coordinates) => ({ type: 'Feature', properties: {}, geometry: { type: 'Polygon', coordinates } })),
  );

/** Meridians and parallels every few degrees. */
export const graticule = (stepDeg: number) => {
  const lines: [number, number][][] = [];
  for (let longitude = -180; longitude <= 180; longitude += stepDeg)
    lines.push([
      [longitude, -85],
      [longitude, 85],
    ]);
  for (let latitude = -80; latitude <= 80; latitude += stepDeg)
    lines.push([
      [-180, latitude],
      [180, latitude],
    ]);
  return collection<MultiLineString>([
    { type: 'Feature', properties: {}, geometry: { type: 'MultiLineString', coordinates: lines } },
  ]);
};

/** Bands in the legend's colours. */
export const bandFeatures = ({ view, levels, features }: MapBands, token: MapTokens) =>
  collection<MultiPolygon>(
    features.map(({ properties: { level }, geometry }) => {
      const name =
        view === 'difference'
          ? differenceToken(level, levels)
          : view === 'chance'
            ? chanceToken(level)
            : gustToken(level);
      return { type: 'Feature', geometry, properties: { level, colour: name ? token(name) : 'rgba(0,0,0,0)' } };
    }),
  );

const CONTOUR_STEP_MS = 10;
/** From here up a hairline must be light to be seen. */
const DARK_FROM_MS = 50;
const DARK_FROM_CHANCE = 0.5;

/** Neighbouring bands share whole rings, in either direction: the same points, so the same smallest one. */
const ringKey = (ring: readonly Position[]) => {
  const points = ring.map(String);
  return `${ring.length} ${points.reduce((least, point) => (point < least ? point : least), points[0] ?? '')}`;
};

/** Hairlines on each full ten, or on each step of a chance: a band's rings without those it shares with the next. */
export const contourFeatures = ({ view, levels, features }: MapBands) =>
  collection<MultiLineString>(
    (view === 'difference' ? [] : features)
      .filter(({ properties: { level } }) => view === 'chance' || level % CONTOUR_STEP_MS === 0)
      .map(({ properties: { level }, geometry }) => {
        const above = levels[levels.indexOf(level) + 1];
        const shared = new Set(
          features
            .filter(({ properties }) => properties.level === above)
            .flatMap(({ geometry: { coordinates } }) => coordinates.flat().map(ringKey)),
        );
        return {
          type: 'Feature',
          properties: { dark: level >= (view === 'chance' ? DARK_FROM_CHANCE : DARK_FROM_MS) },
          geometry: {
            type: 'MultiLineString',
            coordinates: geometry.coordinates.flat().filter((ring) => !shared.has(ringKey(ring))),
          },
        };
      }),
  );

const EDGE_DEG = 0.01;

/** Sides of the worked-out rectangle at which bands break off, though the wind goes on. */
export const edgeFeatures = ({ bbox, computed, features }: MapBands) => {
  if (!bbox || !computed || features.length === 0) return collection<LineString>([]);
  const [west, south, east, north] = computed;
  const sides: Bounds[] = [
    [west, north, west, south],
    [west, south, east, south],
    [east, south, east, north],
    [west, north, east, north],
  ];
  return collection<LineString>(
    sides
      .map((side, index) => ({ side, index }))
      .filter(({ index }) => Math.abs(bbox[index]! - computed[index]!) < EDGE_DEG)
      .map(({ side: [x0, y0, x1, y1], index }) => ({
        type: 'Feature',
        // Its word stands inside: below the line at the top, above it elsewhere.
        properties: { top: index === 3 },
        geometry: {
          type: 'LineString',
          coordinates: [
            [x0, y0],
            [x1, y1],
          ],
        },
      })),
  );
};

export const trackFeatures = ({ path }: MapTrack) =>
  collection<LineString>(
    path.length < 2
      ? []
      : [{ type: 'Feature', properties: {}, geometry: { type: 'LineString', coordinates: path.map(copy) } }],
  );

/** Other tracks beside the one that is shown, as thin lines. */
export const variantFeatures = (paths: readonly (readonly LonLat[])[]) =>
  collection<LineString>(paths.flatMap((path) => trackFeatures({ path, times: [] }).features));

const mercatorY = (latitude: number) => Math.log(Math.tan(Math.PI / 4 + (latitude * Math.PI) / 360)) * (180 / Math.PI);

/** Way of the track on a flat map at one of its points [degrees clockwise from north]. */
const bearingAt = (path: readonly LonLat[], { longitude, latitude }: TrackTime): number => {
  let nearest = 0;
  let least = Infinity;
  path.forEach(([x, y], index) => {
    const distance = Math.hypot(longitudeNear(x, longitude) - longitude, y - latitude);
    if (distance < least) [least, nearest] = [distance, index];
  });
  const from = path[Math.max(0, nearest - 1)]!;
  const to = path[Math.min(path.length - 1, nearest + 1)]!;
  return (Math.atan2(to[0] - from[0], mercatorY(to[1]) - mercatorY(from[1])) * 180) / Math.PI;
};

/** A tick each 3 hours, longer and labelled each 6; midnight says the date. */
export const tickFeatures = ({ path, times }: MapTrack) =>
  collection<Point>(
    times.flatMap((at) => {
      const instant = new Date(at.time);
      const hour = instant.getUTCHours();
      if (hour % 3 !== 0 || instant.getUTCMinutes() !== 0 || path.length < 2) return [];
      const long = hour % 6 === 0;
      return [
        pointAt([at.longitude, at.latitude], {
          long,
          bearing: bearingAt(path, at),
          ...(long && { label: hour === 0 ? `${shortDay(instant)} 00:00` : clock(instant) }),
        }),
      ];
    }),
  );

export interface MapFix {
  longitude: number;
  latitude: number;
  label: string;
}

/** Fixes of a track being edited; every second label, and always the chosen one's. */
export const fixFeatures = (fixes: readonly MapFix[], chosen: number | null) =>
  collection<Point>(
    fixes.map((fix, index) =>
      pointAt([fix.longitude, fix.latitude], {
        index,
        chosen: index === chosen,
        ...((index % 2 === 0 || index === chosen) && { label: fix.label }),
      }),
    ),
  );

export const ringFeatures = (centre: LonLat, radiusM: number) =>
  collection<Polygon>([
    {
      type: 'Feature',
      properties: {},
      geometry: { type: 'Polygon', coordinates: [circleAround(centre, radiusM)] },
    },
  ]);

export const siteIcon = (state: MapSites['state'][number], size: number): string => `site-${state}-${size}`;

export const siteFeatures = (sites: MapSites, indices: readonly number[], largestTiv: number, reference: number) =>
  collection<Point>(
    indices.map((index) =>
      pointAt([longitudeNear(sites.longitude[index]!, reference), sites.latitude[index]!], {
        icon: siteIcon(sites.state[index]!, sizeClass(sites.tivMinor[index]!, largestTiv)),
        // Small marks lie on large ones, and the strongest gusts on top.
        order: leadingGust(sites, index) - 200 * sizeClass(sites.tivMinor[index]!, largestTiv),
      }),
    ),
  );

export const cellFeatures = (cells: readonly CountCell[]) => {
  const largest = Math.max(1, ...cells.map((cell) => cell.tivMinor));
  return collection<Point>(
    cells.map((cell) =>
      pointAt([cell.longitude, cell.latitude], {
        count: count(cell.sites),
        radius: 11 + 15 * Math.sqrt(cell.tivMinor / largest),
      }),
    ),
  );
};

export const chosenFeatures = (point: LonLat | null) => collection<Point>(point ? [pointAt(point, {})] : []);
