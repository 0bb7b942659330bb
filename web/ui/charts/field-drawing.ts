import { contours } from 'd3-contour';
import { GUST_EDGES_MS, GUST_TICKS_MS, gustToken } from './gust-scale.ts';
import { windAt, type FieldGrid } from './field-grid.ts';

export interface FieldMarks {
  headingDeg: number;
  radiusOfMaxWindM: number;
}

interface Drawing {
  context: CanvasRenderingContext2D;
  /** Side of the square in CSS pixels. */
  size: number;
  grid: FieldGrid;
  token: (name: string) => string;
}

const RAD = Math.PI / 180;
const FONT = '700 12px Lato, system-ui, sans-serif';

type Rings = number[][][][];
const ringsAt = ({ grid }: Drawing, thresholds: readonly number[]): { value: number; coordinates: Rings }[] =>
  contours()
    .size([grid.points, grid.points])
    .thresholds([...thresholds])([...grid.gustMs])
    .map(({ value, coordinates }) => ({ value, coordinates }));

/** d3 puts a value in the middle of its cell; here the outermost points lie on the edge. */
const toPixel = ({ size, grid }: Drawing, cell: number): number => ((cell - 0.5) / (grid.points - 1)) * size;

const trace = (drawing: Drawing, coordinates: Rings): Path2D => {
  const path = new Path2D();
  for (const ring of coordinates.flat()) {
    ring.forEach(([x = 0, y = 0], index) => {
      const [px, py] = [toPixel(drawing, x), toPixel(drawing, y)];
      if (index === 0) path.moveTo(px, py);
      else path.lineTo(px, py);
    });
    path.closePath();
  }
  return path;
};

/** Steps of the gust scale in exactly the legend’s colours; nothing below the first. */
const drawBands = (drawing: Drawing): void => {
  const { context, size, token } = drawing;
  context.fillStyle = token('--map-sea');
  context.fillRect(0, 0, size, size);
  for (const { value, coordinates } of ringsAt(drawing, GUST_EDGES_MS)) {
    context.fillStyle = token(gustToken(value)!);
    context.fill(trace(drawing, coordinates), 'evenodd');
  }
};

const withHalo = ({ context, token }: Drawing, width: number, draw: () => void): void => {
  context.lineCap = 'round';
  context.lineJoin = 'round';
  context.strokeStyle = token('--p-porcelain');
  context.globalAlpha = 0.75;
  context.lineWidth = width + 2.4;
  draw();
  context.globalAlpha = 1;
  context.strokeStyle = token('--p-ink');
  context.lineWidth = width;
  draw();
};

const writeText = ({ context, token }: Drawing, text: string, x: number, y: number): void => {
  context.font = FONT;
  context.textAlign = 'center';
  context.textBaseline = 'middle';
  context.lineJoin = 'round';
  context.lineWidth = 3.5;
  context.strokeStyle = token('--p-porcelain');
  context.strokeText(text, x, y);
  context.fillStyle = token('--p-ink');
  context.fillText(text, x, y);
};

/** A hairline each 10 m/s, labelled in the person’s unit at its southernmost point in view. */
const drawContours = (drawing: Drawing, label: (speedMs: number) => string): void => {
  const { context, size, token } = drawing;
  const lines = ringsAt(drawing, GUST_TICKS_MS).filter(({ coordinates }) => coordinates.length > 0);
  context.strokeStyle = token('--p-ink');
  context.lineWidth = 0.75;
  context.globalAlpha = 0.6;
  for (const { coordinates } of lines) context.stroke(trace(drawing, coordinates));
  context.globalAlpha = 1;
  // Above the scale bar.
  let lowest = size - 40;
  for (const { value, coordinates } of lines) {
    const corners = coordinates
      .flatMap(([outer]) => outer ?? [])
      .map(([x = 0, y = 0]) => [toPixel(drawing, x), toPixel(drawing, y)] as const)
      .filter(([x, y]) => x > 18 && x < size - 18 && y < lowest);
    const south = corners.reduce<readonly [number, number] | null>(
      (best, corner) => (best === null || corner[1] > best[1] ? corner : best),
      null,
    );
    if (south === null || south[1] < size / 2) continue;
    writeText(drawing, label(value), south[0], south[1]);
    lowest = south[1] - 15;
  }
};

/** Short arrows that fly with the wind. */
const drawWind = (drawing: Drawing): void => {
  const { context, size, grid } = drawing;
  const across = Math.max(7, Math.round(size / 42));
  const spacing = size / across;
  const path = new Path2D();
  for (let row = 0; row < across; row += 1)
    for (let column = 0; column < across; column += 1) {
      const [x, y] = [(column + 0.5) * spacing, (row + 0.5) * spacing];
      const wind = windAt(grid, {
        eastM: (2 * x * grid.halfWidthM) / size - grid.halfWidthM,
        northM: grid.halfWidthM - (2 * y * grid.halfWidthM) / size,
      });
      if (wind.seaWindMs < 5) continue;
      const angle = (wind.directionDeg + 180) * RAD;
      const [dx, dy] = [Math.sin(angle), -Math.cos(angle)];
      const half = 3.5 + Math.min(5, wind.seaWindMs / 10);
      const [tipX, tipY] = [x + dx * half, y + dy * half];
      path.moveTo(x - dx * half, y - dy * half);
      path.lineTo(tipX, tipY);
      for (const side of [-1, 1]) {
        const barb = angle + Math.PI + side * 0.5;
        path.moveTo(tipX, tipY);
        path.lineTo(tipX + 4 * Math.sin(barb), tipY - 4 * Math.cos(barb));
      }
    }
  withHalo(drawing, 1, () => context.stroke(path));
};

/** Ring of the radius of maximum wind, and where the storm is going. */
const drawStorm = (drawing: Drawing, { headingDeg, radiusOfMaxWindM }: FieldMarks): void => {
  const { context, size, grid } = drawing;
  const middle = size / 2;
  const ring = new Path2D();
  ring.arc(middle, middle, (radiusOfMaxWindM / grid.halfWidthM) * middle, 0, 2 * Math.PI);
  context.setLineDash([5, 4]);
  withHalo(drawing, 1.5, () => context.stroke(ring));
  context.setLineDash([]);
  const angle = headingDeg * RAD;
  const length = size * 0.16;
  const [tipX, tipY] = [middle + length * Math.sin(angle), middle - length * Math.cos(angle)];
  const arrow = new Path2D();
  arrow.arc(middle, middle, 2.5, 0, 2 * Math.PI);
  arrow.moveTo(middle, middle);
  arrow.lineTo(tipX, tipY);
  for (const side of [-1, 1]) {
    const barb = angle + Math.PI + side * 0.45;
    arrow.moveTo(tipX, tipY);
    arrow.lineTo(tipX + 10 * Math.sin(barb), tipY - 10 * Math.cos(barb));
  }
  withHalo(drawing, 2.25, () => context.stroke(arrow));
};

const ROUND_KM = [5, 10, 20, 25, 50, 100, 200];
/** Scale bar and north, in the frame of every picture. */
const drawFrame = (drawing: Drawing): void => {
  const { context, size, grid } = drawing;
  const perKm = size / (grid.halfWidthM / 500);
  const km = ROUND_KM.findLast((length) => length * perKm <= size * 0.26) ?? ROUND_KM[0]!;
  const bar = new Path2D();
  const [x, y] = [14, size - 14];
  bar.moveTo(x, y - 4);
  bar.lineTo(x, y);
  bar.lineTo(x + km * perKm, y);
  bar.lineTo(x + km * perKm, y - 4);
  withHalo(drawing, 1.5, () => context.stroke(bar));
  writeText(drawing, `${km} km`, x + (km * perKm) / 2, y - 10);
  const north = new Path2D();
  north.moveTo(size - 18, 38);
  north.lineTo(size - 18, 24);
  north.moveTo(size - 22, 29);
  north.lineTo(size - 18, 24);
  north.lineTo(size - 14, 29);
  withHalo(drawing, 1.5, () => context.stroke(north));
  writeText(drawing, 'N', size - 18, 14);
};

/** The picture without its cursor: bands, contours, wind, ring, heading, scale and north. */
export const drawField = (drawing: Drawing, marks: FieldMarks, label: (speedMs: number) => string): void => {
  drawBands(drawing);
  drawContours(drawing, label);
  drawWind(drawing);
  drawStorm(drawing, marks);
  drawFrame(drawing);
};
