import { useEffect, useEffectEvent, useRef, useState, type KeyboardEvent } from 'react';
import { Map as MapEngine, setWorkerUrl, type GeoJSONSource, type MapMouseEvent } from 'maplibre-gl';
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?worker&url';
import type { FeatureCollection } from 'geojson';
import { longitudeNear, type Bounds, type LonLat } from './geography.ts';
import { loadLand, type LandDetail } from './land.ts';
import {
  byGust,
  countCells,
  MAX_SITES_IN_VIEW,
  sitesInView,
  type MapBands,
  type MapSites,
  type MapTrack,
} from './map-data.ts';
import {
  bandFeatures,
  cellFeatures,
  chosenFeatures,
  contourFeatures,
  edgeFeatures,
  fixFeatures,
  graticule,
  landFeatures,
  ringFeatures,
  siteFeatures,
  tickFeatures,
  trackFeatures,
  variantFeatures,
  type MapFix,
} from './map-features.ts';
import { addIcons } from './map-icons.ts';
import { mapStyle, type SourceName } from './map-style.ts';
import { readTokens, type MapTokens } from './map-tokens.ts';

setWorkerUrl(workerUrl);

export interface MapCanvasProps {
  /** What the map shows, for those who don't see it. */
  label: string;
  bounds: Bounds;
  track?: MapTrack | null;
  /** Paths of changed copies of the track, thin and dashed. */
  variants?: readonly (readonly LonLat[])[];
  bands?: MapBands | null;
  /** The bands are of what was shown before; others are on their way. */
  dimmed?: boolean;
  /** Room kept free of the framed area on each side, where other things float over the map [px]. */
  padding?: MapPadding;
  sites?: MapSites | null;
  /** Index into the sites. */
  chosenSite?: number | null;
  onChooseSite?: (index: number) => void;
  /** Text beside the pointer over a site. */
  describeSite?: (index: number) => string;
  onView?: (bounds: Bounds) => void;
  fixes?: readonly MapFix[];
  chosenFix?: number | null;
  onChooseFix?: (index: number) => void;
  onMoveFix?: (index: number, to: LonLat) => void;
  /** Circle drawn round the chosen fix [m]. */
  ringM?: number | null;
  /** The engine couldn't start. */
  onFail: (reason: string) => void;
}

export interface MapPadding {
  top: number;
  right: number;
  bottom: number;
  left: number;
}

const EVEN: MapPadding = { top: 12, right: 12, bottom: 12, left: 12 };
/** Bands of what was shown before. */
const DIM = 0.4;
const PICK_PX = 14;
/** Wider than this, the coarse land is as good as the fine one. */
const FINE_BELOW_DEG = 40;
/** Closer than this, the coast is drawn from the very polygons the wind was computed over. */
const FINEST_BELOW_DEG = 8;
const SETTLED_ZOOM = 11;

const NO_SITES: MapSites = {
  siteNo: [],
  ref: [],
  longitude: [],
  latitude: [],
  tivMinor: [],
  state: [],
  plainMs: [],
  p5Ms: [],
  p95Ms: [],
};

interface Started {
  map: MapEngine;
  token: MapTokens;
}

const setData = ({ map }: Started, name: SourceName, data: FeatureCollection) =>
  map.getSource<GeoJSONSource>(name)?.setData(data);

const boundsIn = (map: MapEngine): Bounds => {
  const bounds = map.getBounds();
  return [bounds.getWest(), bounds.getSouth(), bounds.getEast(), bounds.getNorth()];
};

/** The map engine with our layers; it draws what it is given and reports what is pointed at. */
export function MapCanvas(props: MapCanvasProps) {
  const {
    label,
    bounds,
    track,
    variants,
    bands,
    dimmed = false,
    padding = EVEN,
    sites = null,
    chosenSite = null,
    fixes,
    chosenFix = null,
    ringM = null,
  } = props;
  const frame = useRef<HTMLDivElement>(null);
  const [started, setStarted] = useState<Started | null>(null);
  const [view, setView] = useState<Bounds | null>(null);
  const [pointed, setPointed] = useState<{ x: number; y: number; text: string } | null>(null);

  const onFail = useEffectEvent((reason: string) => props.onFail(reason));
  const firstBounds = useEffectEvent(() => ({ bounds, fitBoundsOptions: { padding } }));
  const moved = useEffectEvent((map: MapEngine) => {
    const now = boundsIn(map);
    setView(now);
    props.onView?.(now);
  });
  const nearestSite = (map: MapEngine, { point }: MapMouseEvent): number | null => {
    if (!sites || !view) return null;
    const visible = sitesInView(sites, view);
    if (visible.length > MAX_SITES_IN_VIEW) return null;
    const reference = map.getCenter().lng;
    let nearest: number | null = null;
    let least = PICK_PX;
    for (const index of visible) {
      const at = map.project([longitudeNear(sites.longitude[index]!, reference), sites.latitude[index]!]);
      const distance = Math.hypot(at.x - point.x, at.y - point.y);
      if (distance < least) [least, nearest] = [distance, index];
    }
    return nearest;
  };
  const clicked = useEffectEvent((map: MapEngine, event: MapMouseEvent) => {
    const site = nearestSite(map, event);
    if (site !== null) return props.onChooseSite?.(site);
    const cell = map.queryRenderedFeatures(event.point, { layers: ['cells'] })[0];
    if (cell?.geometry.type === 'Point')
      map.easeTo({ center: cell.geometry.coordinates as [number, number], zoom: map.getZoom() + 2 });
    const fix = map.queryRenderedFeatures(event.point, { layers: ['fixes'] })[0];
    if (fix) props.onChooseFix?.(Number(fix.properties.index));
  });
  const pointedAt = useEffectEvent((map: MapEngine, event: MapMouseEvent) => {
    const site = nearestSite(map, event);
    map.getCanvas().style.cursor = site !== null || pickedFix(map, event) !== null ? 'pointer' : '';
    setPointed(
      site !== null && props.describeSite
        ? { x: event.point.x, y: event.point.y, text: props.describeSite(site) }
        : null,
    );
  });
  const moveFix = useEffectEvent((index: number, to: LonLat) => props.onMoveFix?.(index, to));
  const canMoveFixes = useEffectEvent(() => props.onMoveFix !== undefined);

  useEffect(() => {
    const token = readTokens();
    let map: MapEngine;
    try {
      map = new MapEngine({
        container: frame.current!,
        style: mapStyle(token),
        ...firstBounds(),
        attributionControl: false,
        dragRotate: false,
        pitchWithRotate: false,
        touchPitch: false,
        maxZoom: 15,
      });
    } catch {
      onFail('this browser offers no WebGL');
      return;
    }
    map.touchZoomRotate.disableRotation();
    map.keyboard.disableRotation();
    map.once('load', () => {
      addIcons(map, token);
      setStarted({ map, token });
      moved(map);
    });
    map.on('moveend', () => moved(map));
    map.on('click', (event) => clicked(map, event));
    map.on('mousemove', (event) => pointedAt(map, event));
    map.on('mouseout', () => setPointed(null));
    map.on('webglcontextlost', () => onFail('the browser took the map’s graphics memory away'));
    map.on('mousedown', (event) => {
      const index = canMoveFixes() ? pickedFix(map, event) : null;
      if (index === null) return;
      event.preventDefault();
      map.once('mouseup', (up) => {
        if (Math.hypot(up.point.x - event.point.x, up.point.y - event.point.y) < 3) return;
        moveFix(index, [longitudeNear(up.lngLat.lng, 0), up.lngLat.lat]);
      });
    });
    return () => {
      setStarted(null);
      map.remove();
    };
  }, []);

  useEffect(() => {
    if (!started) return;
    let current = true;
    setData(started, 'graticule', graticule(10));
    const show = (detail: LandDetail) =>
      loadLand(detail).then((land) => {
        if (current) setData(started, 'land', landFeatures(land));
      });
    const [west, , east] = boundsIn(started.map);
    const better = east - west < FINEST_BELOW_DEG ? 'finest' : east - west < FINE_BELOW_DEG ? 'fine' : null;
    // A coarse coast at once; should the better one not arrive, it stays.
    void show('coarse')
      .then(() => (better ? show(better) : undefined))
      .catch(() => undefined);
    return () => {
      current = false;
    };
  }, [started]);

  useEffect(() => {
    if (!started) return;
    setData(started, 'track', track ? trackFeatures(track) : emptyCollection());
    setData(started, 'ticks', track ? tickFeatures(track) : emptyCollection());
  }, [started, track]);

  useEffect(() => {
    if (started) setData(started, 'variants', variants ? variantFeatures(variants) : emptyCollection());
  }, [started, variants]);

  useEffect(() => {
    if (!started) return;
    setData(started, 'bands', bands ? bandFeatures(bands, started.token) : emptyCollection());
    setData(started, 'contours', bands ? contourFeatures(bands) : emptyCollection());
    setData(started, 'edge', bands ? edgeFeatures(bands) : emptyCollection());
    started.map.setLayoutProperty('coast-over-bands', 'visibility', bands ? 'visible' : 'none');
  }, [started, bands]);

  useEffect(() => {
    started?.map.setPaintProperty('bands', 'fill-opacity', dimmed ? DIM : 1);
  }, [started, dimmed]);

  useEffect(() => {
    if (!started || !view) return;
    const all = sites ?? NO_SITES;
    const visible = sitesInView(all, view);
    const largest = all.tivMinor.reduce((most, value) => Math.max(most, value), 0);
    const reference = started.map.getCenter().lng;
    const tooMany = visible.length > MAX_SITES_IN_VIEW;
    const project = (point: LonLat) => started.map.project([longitudeNear(point[0], reference), point[1]]);
    setData(started, 'cells', tooMany ? cellFeatures(countCells(all, visible, project)) : emptyCollection());
    setData(started, 'sites', tooMany ? emptyCollection() : siteFeatures(all, visible, largest, reference));
  }, [started, sites, view]);

  useEffect(() => {
    if (!started) return;
    const point: LonLat | null =
      sites && chosenSite !== null && sites.siteNo[chosenSite] !== undefined
        ? [sites.longitude[chosenSite]!, sites.latitude[chosenSite]!]
        : null;
    setData(started, 'chosen', chosenFeatures(point));
    if (point && view && sitesInView(sites!, view).indexOf(chosenSite!) === -1)
      started.map.easeTo({ center: [point[0], point[1]], zoom: Math.min(SETTLED_ZOOM, started.map.getZoom()) });
    // Only a new choice moves the map, not the person's own panning.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [started, sites, chosenSite]);

  useEffect(() => {
    if (!started) return;
    setData(started, 'fixes', fixes ? fixFeatures(fixes, chosenFix) : emptyCollection());
    const fix = chosenFix === null ? undefined : fixes?.[chosenFix];
    setData(started, 'ring', fix && ringM ? ringFeatures([fix.longitude, fix.latitude], ringM) : emptyCollection());
  }, [started, fixes, chosenFix, ringM]);

  const [west, south, east, north] = bounds;
  // Room that comes or goes later doesn't move the map.
  const fit = useEffectEvent((map: MapEngine) => map.fitBounds(bounds, { padding, animate: false }));
  useEffect(() => {
    if (started) fit(started.map);
  }, [started, west, south, east, north]);

  const walk = (event: KeyboardEvent) => {
    if (!sites || !view || (event.key !== 'n' && event.key !== 'p') || event.ctrlKey || event.metaKey) return;
    const order = byGust(sites, sitesInView(sites, view));
    if (order.length === 0) return;
    const at = chosenSite === null ? -1 : order.indexOf(chosenSite);
    const step = event.key === 'n' ? 1 : -1;
    props.onChooseSite?.(order[at === -1 ? 0 : (at + step + order.length) % order.length]!);
  };

  return (
    <div className="absolute inset-0" onKeyDown={walk}>
      <div
        ref={frame}
        className="absolute inset-0"
        role="application"
        aria-label={label}
        data-ready={started !== null}
      />
      {pointed && (
        <span
          className="pointer-events-none absolute z-1 -translate-x-1/2 translate-y-4 rounded-1 border border-rule bg-sheet px-2 py-1 text-12 whitespace-nowrap shadow-2"
          style={{ left: pointed.x, top: pointed.y }}
        >
          {pointed.text}
        </span>
      )}
    </div>
  );
}

const emptyCollection = (): FeatureCollection => ({ type: 'FeatureCollection', features: [] });

const pickedFix = (map: MapEngine, { point }: MapMouseEvent): number | null => {
  const [hit] = map.queryRenderedFeatures(
    [
      [point.x - 6, point.y - 6],
      [point.x + 6, point.y + 6],
    ],
    { layers: map.getLayer('fixes') ? ['fixes'] : [] },
  );
  return hit ? Number(hit.properties.index) : null;
};
