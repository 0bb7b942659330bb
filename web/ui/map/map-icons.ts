import type { Map as MapEngine } from 'maplibre-gl';
import { SITE_SIZES, type SiteState } from './map-data.ts';
import { siteIcon } from './map-features.ts';
import type { MapTokens } from './map-tokens.ts';

const PIXEL_RATIO = 2;
const RADII_PX = [3.6, 4.6, 5.8, 7.4, 9.4];
const EDGE_PX = 1.3;
const STATES: readonly SiteState[] = ['ready', 'notes', 'held', 'set_aside'];

const outline = (context: CanvasRenderingContext2D, state: SiteState, radius: number) => {
  context.beginPath();
  if (state === 'notes') {
    // A diamond of the circle's area.
    const reach = radius * 1.25;
    context.moveTo(0, -reach);
    context.lineTo(reach, 0);
    context.lineTo(0, reach);
    context.lineTo(-reach, 0);
    context.closePath();
  } else if (state === 'ready') context.arc(0, 0, radius, 0, 2 * Math.PI);
  else context.rect(-radius * 0.89, -radius * 0.89, radius * 1.78, radius * 1.78);
};

const draw = (sizePx: number, paint: (context: CanvasRenderingContext2D) => void): ImageData => {
  const canvas = document.createElement('canvas');
  canvas.width = canvas.height = Math.ceil(sizePx * PIXEL_RATIO);
  const context = canvas.getContext('2d')!;
  context.scale(PIXEL_RATIO, PIXEL_RATIO);
  context.translate(sizePx / 2, sizePx / 2);
  paint(context);
  return context.getImageData(0, 0, canvas.width, canvas.height);
};

const tick = (lengthPx: number, token: MapTokens) =>
  draw(20, (context) => {
    for (const [colour, width, extra] of [
      [token('--map-halo'), 3.6, 1],
      [token('--map-track'), 1.7, 0],
    ] as const) {
      context.strokeStyle = colour;
      context.lineWidth = width;
      context.beginPath();
      context.moveTo(-lengthPx / 2 - extra, 0);
      context.lineTo(lengthPx / 2 + extra, 0);
      context.stroke();
    }
  });

/** Circle ready, diamond with notes, square held; light fill and Ink edge, so they read on every band. */
export const addIcons = (map: MapEngine, token: MapTokens): void => {
  for (const state of STATES)
    for (let size = 0; size < SITE_SIZES; size += 1) {
      const radius = RADII_PX[size]!;
      const image = draw(2 * (radius * 1.25 + EDGE_PX), (context) => {
        outline(context, state, radius);
        context.fillStyle = token(state === 'held' || state === 'set_aside' ? '--p-pale-brass' : '--p-porcelain');
        context.fill();
        context.lineWidth = EDGE_PX;
        context.strokeStyle = token('--p-ink');
        context.stroke();
      });
      map.addImage(siteIcon(state, size), image, { pixelRatio: PIXEL_RATIO });
    }
  map.addImage('tick-short', tick(7, token), { pixelRatio: PIXEL_RATIO });
  map.addImage('tick-long', tick(12, token), { pixelRatio: PIXEL_RATIO });
};
