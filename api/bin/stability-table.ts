import { writeFileSync } from 'node:fs';
import { GRID_EYE_RATIOS, GRID_WIDTHS, stabilityGrid } from '#engine/ring/stability-grid.ts';

// Writes the shipped table anew; a test compares it with the solver.
const { growth, wavenumber, amplitude } = stabilityGrid(GRID_WIDTHS, GRID_EYE_RATIOS);
const rows = (name: string, values: readonly (readonly number[])[]) =>
  `  ${name}: [\n${values.map((row) => `    [${row.join(', ')}],\n`).join('')}  ],\n`;
const target = new URL('../engine/ring/stability-table.ts', import.meta.url);
writeFileSync(
  target,
  `import { GRID_EYE_RATIOS, GRID_WIDTHS, type StabilityGrid } from './stability-grid.ts';

// prettier-ignore
/** Fastest waves of smooth rings, written by \`npm run stability-table\`. Source: stabilityGrid. */
export const STABILITY_TABLE: StabilityGrid = {
  widthFraction: GRID_WIDTHS,
  eyeRatio: GRID_EYE_RATIOS,
${rows('growth', growth)}${rows('wavenumber', wavenumber)}${rows('amplitude', amplitude)}};
`,
);
