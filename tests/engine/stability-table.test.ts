import { describe, expect, it } from 'vitest';
import { GRID_EYE_RATIOS, GRID_WIDTHS, stabilityGrid } from '#engine/ring/stability-grid.ts';
import { STABILITY_TABLE } from '#engine/ring/stability-table.ts';

describe('the shipped table of stability', () => {
  it('is what the solver says today', () => {
    expect(STABILITY_TABLE).toEqual(stabilityGrid(GRID_WIDTHS, GRID_EYE_RATIOS));
  });
  it('shows how slowing the eye brings the pattern on: growth falls as the eye fills, at every width', () => {
    // Rayleigh's and Fjørtoft's criteria: the stronger the reversal of the vorticity gradient, the stronger the growth.
    GRID_WIDTHS.forEach((_, column) => {
      const growth = STABILITY_TABLE.growth.map((row) => row[column]!);
      // Near the floor another, hardly growing wave can take over.
      growth.slice(1).forEach((value, row) => {
        if (value > 0.05) expect(value).toBeLessThanOrEqual(growth[row]!);
      });
    });
  });
  it('gives thinner rings more vortices round an empty eye', () => {
    const counts = STABILITY_TABLE.wavenumber[0]!;
    counts.slice(1).forEach((count, column) => expect(count).toBeLessThanOrEqual(counts[column]!));
    expect([counts[0], counts.at(-1)]).toEqual([9, 3]);
  });
});
