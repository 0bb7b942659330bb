import { contours } from 'd3-contour';
import type { StabilityMap } from '#contract/rings.ts';

/** Growth over average vorticity at which the next shade begins; the first is where rings count as unstable. */
export const GROWTH_EDGES = [0.02, 0.06, 0.12, 0.2, 0.3, 0.42, 0.6, 0.8] as const;

/** Columns from thick to thin, rows from the filled eye at the top to the empty one. */
const arranged = <T>(rows: readonly (readonly T[])[]): T[] => [...rows].reverse().flatMap((row) => [...row].reverse());

const pathOf = (coordinates: number[][][][]): string =>
  coordinates
    .flat()
    .map((ring) => `M${ring.map(([x = 0, y = 0]) => `${x.toFixed(3)} ${y.toFixed(3)}`).join('L')}Z`)
    .join('');

export interface StabilityShapes {
  /** Columns and rows; a value stands in the middle of its cell. */
  columns: number;
  rows: number;
  bands: { growth: number; path: string }[];
  /** Where each wave is the fastest, with a place for its name, as shares from the left and the top. */
  regions: { m: number | null; path: string; at: { x: number; y: number } | null }[];
}

const SMALLEST_NAMED = 12;

/** The map as paths in units of cells. */
export const stabilityShapes = ({ widthFraction, eyeRatio, growth, wavenumber }: StabilityMap): StabilityShapes => {
  const [columns, rows] = [widthFraction.length, eyeRatio.length];
  const values = arranged(growth);
  const fastest = arranged(wavenumber);
  const draw = contours().size([columns, rows]);
  const regions = [...new Set(fastest)].map((m) => {
    const cells = fastest.flatMap((other, index) => (other === m ? [index] : []));
    const mean = (of: (index: number) => number) => cells.reduce((sum, index) => sum + of(index), 0) / cells.length;
    const centre = { x: mean((index) => index % columns), y: mean((index) => Math.floor(index / columns)) };
    const lift = m === null ? 0 : rows * (m % 2 === 0 ? -0.14 : 0.1);
    // A bent region is named at its own cell nearest to the middle; neighbours take turns above and below it.
    const away = (index: number) =>
      Math.hypot((index % columns) - centre.x, 1.5 * (Math.floor(index / columns) - centre.y - lift));
    const named = cells.reduce((best, index) => (away(index) < away(best) ? index : best), cells[0]!);
    const [shape] = draw.thresholds([0.5])(fastest.map((other) => (other === m ? 1 : 0)));
    return {
      m,
      path: pathOf(shape?.coordinates ?? []),
      at:
        cells.length < SMALLEST_NAMED
          ? null
          : { x: (named % columns) / (columns - 1), y: Math.floor(named / columns) / (rows - 1) },
    };
  });
  return {
    columns,
    rows,
    bands: draw
      .thresholds([...GROWTH_EDGES])(values)
      .map(({ value, coordinates }) => ({ growth: value, path: pathOf(coordinates) })),
    regions,
  };
};
