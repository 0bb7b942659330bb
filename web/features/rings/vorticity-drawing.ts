import { SIDE_IN_RADII } from './film.ts';

const STOPS = ['--vort-0', '--vort-1', '--vort-2', '--vort-3', '--vort-4', '--vort-5', '--vort-6'];
const SHADES = 256;

const parse = (hex: string): [number, number, number] => {
  const value = parseInt(hex.slice(1), 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
};

/** The vorticity colours of the theme's tokens, from none to strongest. */
export const vorticityShades = (): Uint8ClampedArray => {
  const style = getComputedStyle(document.documentElement);
  const colours = STOPS.map((name) => parse(style.getPropertyValue(name).trim() || '#000000'));
  const shades = new Uint8ClampedArray(SHADES * 3);
  for (let k = 0; k < SHADES; k++) {
    const at = (k / (SHADES - 1)) * (colours.length - 1);
    const low = Math.min(Math.floor(at), colours.length - 2);
    for (let c = 0; c < 3; c++) {
      const [from, to] = [colours[low]![c]!, colours[low + 1]![c]!];
      shades[3 * k + c] = from + (at - low) * (to - from);
    }
  }
  return shades;
};

export interface VorticityView {
  vorticity: Float32Array;
  /** Vorticity of the darkest shade [s⁻¹]. */
  strongest: number;
  /** Distance from the middle to the upper edge, in radii of maximum wind. */
  reach: number;
  /** Seen from above: clockwise flow in the south. */
  mirrored: boolean;
}

/** Cubic weights through four points, so that a coarse grid doesn't show as squares. */
const weights = (t: number): [number, number, number, number] => [
  -0.5 * t * (1 - t) * (1 - t),
  1 + t * t * (1.5 * t - 2.5),
  t * (0.5 + t * (2 - 1.5 * t)),
  -0.5 * t * t * (1 - t),
];

/** Paints the field around the middle, north up. */
export const paintVorticity = (canvas: HTMLCanvasElement, view: VorticityView): void => {
  const context = canvas.getContext('2d');
  if (!context) return;
  const { width, height } = canvas;
  const { vorticity, strongest, reach, mirrored } = view;
  const points = Math.round(Math.sqrt(vorticity.length));
  const shades = vorticityShades();
  const image = context.createImageData(width, height);
  const perPixel = (2 * reach * points) / (SIDE_IN_RADII * height);
  const across = Array.from({ length: width }, (_, x) => {
    const from = points / 2 + (mirrored ? -1 : 1) * (x + 0.5 - width / 2) * perPixel;
    const cell = Math.floor(from);
    return { cell, w: weights(from - cell) };
  });
  const wrap = (cell: number) => ((cell % points) + points) % points;
  for (let y = 0; y < height; y++) {
    const from = points / 2 - (y + 0.5 - height / 2) * perPixel;
    const row = Math.floor(from);
    const down = weights(from - row);
    const rows = [-1, 0, 1, 2].map((k) => wrap(row + k) * points);
    for (let x = 0; x < width; x++) {
      const { cell, w } = across[x]!;
      let sum = 0;
      for (let j = 0; j < 4; j++) {
        const at = rows[j]!;
        const line =
          w[0] * vorticity[at + wrap(cell - 1)]! +
          w[1] * vorticity[at + wrap(cell)]! +
          w[2] * vorticity[at + wrap(cell + 1)]! +
          w[3] * vorticity[at + wrap(cell + 2)]!;
        sum += down[j]! * line;
      }
      const shade = 3 * Math.round(Math.min(1, Math.max(0, sum / strongest)) * (SHADES - 1));
      const to = 4 * (y * width + x);
      image.data[to] = shades[shade]!;
      image.data[to + 1] = shades[shade + 1]!;
      image.data[to + 2] = shades[shade + 2]!;
      image.data[to + 3] = 255;
    }
  }
  context.putImageData(image, 0, 0);
};
