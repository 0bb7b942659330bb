import { amplitudeLaw, dominantMode } from './amplitude.ts';
import { ringShape, smoothRingModes } from './stability.ts';

/** Fastest wave of smooth rings over ring width and eye ratio; rows by eye ratio, columns by width. */
export type StabilityGrid = {
  /** Ring width over the radius of maximum wind [1]. */
  readonly widthFraction: readonly number[];
  /** Eye over average vorticity [1]. */
  readonly eyeRatio: readonly number[];
  /** Growth of the fastest wave [average vorticity], 0 where none grows. */
  readonly growth: readonly (readonly number[])[];
  /** Its wavenumber, 0 where none grows. */
  readonly wavenumber: readonly (readonly number[])[];
  /** Vortex amplitude A1 [1]. */
  readonly amplitude: readonly (readonly number[])[];
};

/** Widths and eye ratios of the shipped table: the range in which rings are used. */
export const GRID_WIDTHS = steps(0.1, 0.45, 0.01);
export const GRID_EYE_RATIOS = steps(0, 0.6, 0.02);

/**
 * Solves the smooth ring at every pair of a width and an eye ratio; growth and amplitude are rounded to 1e-4.
 *
 * @param widths    Ring width over the radius of maximum wind [1].
 * @param eyeRatios Eye over average vorticity [1].
 * @returns The grid.
 * @throws {DomainError} when a value is not finite.
 * @source ring/stability.ts and ring/amplitude.ts.
 */
export function stabilityGrid(widths: readonly number[], eyeRatios: readonly number[]): StabilityGrid {
  const rows = eyeRatios.map((eyeRatio) =>
    widths.map((width) => {
      const { delta, gamma } = ringShape(width, eyeRatio);
      const modes = smoothRingModes(delta, gamma);
      const fastest = dominantMode(modes);
      return {
        growth: rounded(fastest?.growth ?? 0),
        wavenumber: fastest?.m ?? 0,
        amplitude: rounded(amplitudeLaw(modes)),
      };
    }),
  );
  return {
    widthFraction: widths,
    eyeRatio: eyeRatios,
    growth: rows.map((row) => row.map(({ growth }) => growth)),
    wavenumber: rows.map((row) => row.map(({ wavenumber }) => wavenumber)),
    amplitude: rows.map((row) => row.map(({ amplitude }) => amplitude)),
  };
}

function steps(first: number, last: number, step: number): number[] {
  const count = Math.round((last - first) / step) + 1;
  return Array.from({ length: count }, (_, k) => Math.round((first + k * step) * 100) / 100);
}

function rounded(value: number): number {
  return Math.round(value * 1e4) / 1e4;
}
