import type { SiteField } from '#contract/portfolios.ts';
import type { FileRow, Received } from './file-row.ts';

const TOTAL_LABEL = /^\s*(?:grand\s+|sub-?\s*|sum\s+|report\s+)?totals?\b/i;

/** Turns the records of a file into rows: only mapped cells are kept, and lines that aren't sites are told apart. */
export function lineReader(mapping: readonly { index: number; field: SiteField }[], headerRow: number) {
  const places = mapping.filter(({ field }) => field === 'latitude' || field === 'longitude').map(({ index }) => index);
  return (record: readonly string[], line: number): FileRow | null => {
    if (line === headerRow) return null;
    const received: Received = {};
    for (const { index, field } of mapping) {
      const cell = record[index];
      if (cell !== undefined && cell.trim() !== '') received[field] = cell;
    }
    if (record.every((cell) => cell.trim() === '')) return { row: line, line: 'blank', received };
    if (line < headerRow) return { row: line, line: 'preamble', received };
    const placed = places.some((index) => record[index]?.trim());
    return { row: line, line: !placed && record.some((cell) => TOTAL_LABEL.test(cell)) ? 'total' : 'site', received };
  };
}
