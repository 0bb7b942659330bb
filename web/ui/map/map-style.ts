import type { FeatureCollection } from 'geojson';
import type { ExpressionSpecification, LayerSpecification, StyleSpecification } from 'maplibre-gl';
import latoBold from '../../../fonts/lato-latin-700-normal.woff2?url';
import latoBoldExtended from '../../../fonts/lato-latin-ext-700-normal.woff2?url';
import type { MapTokens } from './map-tokens.ts';

const nothing = (): FeatureCollection => ({ type: 'FeatureCollection', features: [] });

export const SOURCES = [
  'land',
  'graticule',
  'bands',
  'contours',
  'edge',
  'ring',
  'variants',
  'track',
  'ticks',
  'fixes',
  'cells',
  'sites',
  'chosen',
] as const;
export type SourceName = (typeof SOURCES)[number];

const FONT = ['Lato Bold'];
const here = (url: string) => new URL(url, document.baseURI).href;

const get = (name: string): ExpressionSpecification => ['get', name];
const isTrue = (name: string): ExpressionSpecification => ['==', ['get', name], true];

const layers = (token: MapTokens): LayerSpecification[] => [
  { id: 'sea', type: 'background', paint: { 'background-color': token('--map-sea') } },
  { id: 'land', type: 'fill', source: 'land', paint: { 'fill-color': token('--map-land'), 'fill-antialias': false } },
  {
    id: 'graticule',
    type: 'line',
    source: 'graticule',
    paint: { 'line-color': token('--map-graticule'), 'line-width': 0.6 },
  },
  { id: 'coast', type: 'line', source: 'land', paint: { 'line-color': token('--map-coast'), 'line-width': 0.8 } },
  {
    id: 'bands',
    type: 'fill',
    source: 'bands',
    layout: { 'fill-sort-key': get('level') },
    paint: { 'fill-color': get('colour') },
  },
  {
    id: 'contours',
    type: 'line',
    source: 'contours',
    paint: {
      'line-color': ['case', isTrue('dark'), token('--p-porcelain'), token('--p-ink')],
      'line-width': 0.7,
      'line-opacity': ['case', isTrue('dark'), 0.7, 0.32],
    },
  },
  {
    // Over bands the coast must stay readable on every step of the scale.
    id: 'coast-over-bands',
    type: 'line',
    source: 'land',
    layout: { visibility: 'none' },
    paint: { 'line-color': token('--p-ink'), 'line-width': 0.9, 'line-opacity': 0.62 },
  },
  {
    id: 'edge',
    type: 'line',
    source: 'edge',
    paint: { 'line-color': token('--p-ink'), 'line-width': 1.4, 'line-dasharray': [3, 2] },
  },
  {
    id: 'edge-label',
    type: 'symbol',
    source: 'edge',
    layout: {
      'symbol-placement': 'line',
      'symbol-spacing': 500,
      'text-field': 'Edge of the area worked out',
      'text-font': FONT,
      'text-size': 12,
      'text-offset': ['case', isTrue('top'), ['literal', [0, 0.9]], ['literal', [0, -0.9]]],
      'text-padding': 8,
    },
    paint: {
      'text-color': token('--map-track'),
      'text-halo-color': token('--map-halo'),
      'text-halo-width': 1.8,
    },
  },
  {
    id: 'ring-fill',
    type: 'fill',
    source: 'ring',
    paint: { 'fill-color': token('--p-ink'), 'fill-opacity': 0.1 },
  },
  {
    id: 'ring',
    type: 'line',
    source: 'ring',
    paint: { 'line-color': token('--caution'), 'line-width': 1.2, 'line-dasharray': [2, 2] },
  },
  {
    id: 'variants',
    type: 'line',
    source: 'variants',
    layout: { 'line-join': 'round' },
    paint: { 'line-color': token('--map-track'), 'line-width': 1.1, 'line-opacity': 0.75, 'line-dasharray': [4, 3] },
  },
  {
    id: 'track-halo',
    type: 'line',
    source: 'track',
    layout: { 'line-join': 'round', 'line-cap': 'round' },
    paint: { 'line-color': token('--map-halo'), 'line-width': 4.6, 'line-opacity': 0.85 },
  },
  {
    id: 'track',
    type: 'line',
    source: 'track',
    layout: { 'line-join': 'round', 'line-cap': 'round' },
    paint: { 'line-color': token('--map-track'), 'line-width': 1.7 },
  },
  {
    id: 'ticks',
    type: 'symbol',
    source: 'ticks',
    layout: {
      'icon-image': ['case', isTrue('long'), 'tick-long', 'tick-short'],
      'icon-rotate': get('bearing'),
      'icon-rotation-alignment': 'map',
      'icon-allow-overlap': true,
      'icon-ignore-placement': true,
    },
  },
  {
    id: 'fixes',
    type: 'circle',
    source: 'fixes',
    paint: {
      'circle-radius': ['case', isTrue('chosen'), 7.5, 4.5],
      'circle-color': token('--map-halo'),
      'circle-stroke-color': ['case', isTrue('chosen'), token('--caution'), token('--map-track')],
      'circle-stroke-width': ['case', isTrue('chosen'), 2.6, 1.6],
    },
  },
  {
    id: 'cells',
    type: 'circle',
    source: 'cells',
    paint: {
      'circle-radius': get('radius'),
      'circle-color': token('--p-porcelain'),
      'circle-opacity': 0.94,
      'circle-stroke-color': token('--p-ink'),
      'circle-stroke-width': 1.3,
    },
  },
  {
    id: 'cell-counts',
    type: 'symbol',
    source: 'cells',
    layout: {
      'text-field': get('count'),
      'text-font': FONT,
      'text-size': 12,
      'text-allow-overlap': true,
      'text-ignore-placement': true,
    },
    paint: { 'text-color': token('--p-ink') },
  },
  {
    id: 'sites',
    type: 'symbol',
    source: 'sites',
    layout: {
      'icon-image': get('icon'),
      'icon-allow-overlap': true,
      'icon-ignore-placement': true,
      'symbol-sort-key': get('order'),
    },
  },
  {
    id: 'chosen-outer',
    type: 'circle',
    source: 'chosen',
    paint: {
      'circle-radius': 15,
      'circle-opacity': 0,
      'circle-stroke-color': token('--p-ink'),
      'circle-stroke-width': 2.2,
    },
  },
  {
    id: 'chosen-inner',
    type: 'circle',
    source: 'chosen',
    paint: {
      'circle-radius': 12,
      'circle-opacity': 0,
      'circle-stroke-color': token('--p-porcelain'),
      'circle-stroke-width': 2.2,
    },
  },
  {
    id: 'tick-labels',
    type: 'symbol',
    source: 'ticks',
    filter: ['has', 'label'],
    layout: {
      'text-field': get('label'),
      'text-font': FONT,
      'text-size': 13,
      'text-anchor': 'left',
      'text-offset': [1.1, 0],
      'text-padding': 4,
    },
    paint: {
      'text-color': token('--map-track'),
      'text-halo-color': token('--map-halo'),
      'text-halo-width': 1.8,
    },
  },
  {
    id: 'fix-labels',
    type: 'symbol',
    source: 'fixes',
    filter: ['has', 'label'],
    layout: {
      'text-field': get('label'),
      'text-font': FONT,
      'text-size': 12,
      'text-anchor': 'left',
      'text-offset': [0.95, 0],
      'text-padding': 3,
    },
    paint: {
      'text-color': token('--map-track'),
      'text-halo-color': token('--map-halo'),
      'text-halo-width': 1.6,
    },
  },
];

/** Sea, land and our own layers; no tiles and no glyphs from elsewhere. */
export const mapStyle = (token: MapTokens): StyleSpecification => ({
  version: 8,
  'font-faces': {
    'Lato Bold': [
      { url: here(latoBoldExtended), 'unicode-range': ['U+0100-02BA'] },
      { url: here(latoBold), 'unicode-range': ['U+0000-00FF', 'U+2000-206F'] },
    ],
  },
  sources: Object.fromEntries(
    SOURCES.map((name) => [
      name,
      { type: 'geojson' as const, data: nothing(), ...(name === 'land' && { tolerance: 0.2 }) },
    ]),
  ),
  layers: layers(token),
});
