import { receivedText } from '../numbers.ts';
import { rowRule } from '../rule.ts';
import type { SiteRow } from '../file-row.ts';

const EARLIEST = 1700;

/** A year built we can use: four digits from 1700 to next year. */
export function yearBuiltOf(row: SiteRow, year: number): number | null {
  const text = row.received.year_built?.trim() ?? '';
  const value = /^\d{4}(?:\.0+)?$/.test(text) ? Number.parseInt(text, 10) : null;
  return value !== null && value >= EARLIEST && value <= year + 1 ? value : null;
}

/** Storeys from 1 to 200; half storeys count as whole ones. */
export function storeysOf(row: SiteRow): number | null {
  const text = row.received.storeys?.trim() ?? '';
  const value = /^\d{1,3}(?:\.\d+)?$/.test(text) ? Math.ceil(Number(text)) : null;
  return value !== null && value >= 1 && value <= 200 ? value : null;
}

export const constructionMissing = rowRule({
  code: 'BLDG-01',
  severity: 'note',
  title: 'Construction is missing',
  check: (row) =>
    row.construction === null && !isUnlisted(row.received.construction)
      ? {
          field: 'construction',
          received: row.received.construction ?? null,
          text: `Row ${row.row}: construction is missing. We will use the 'unknown' blend, marked as assumed.`,
        }
      : null,
});

const UNKNOWN_WORDS = /^(?:unknown|not known|n\/?a|tbd|tba|other|unk|none)?$/i;
const isUnlisted = (text: string | undefined) => !UNKNOWN_WORDS.test(text?.trim() ?? '');

export const wordUnlisted = rowRule({
  code: 'BLDG-02',
  severity: 'note',
  title: 'Words not in your list',
  check: (row) => {
    const unlisted = (['construction', 'occupancy', 'terrain'] as const).filter(
      (field) => row[field] === null && isUnlisted(row.received[field]),
    );
    if (unlisted.length === 0) return null;
    const words = unlisted.map((field) => `'${receivedText(row.received[field]!.trim())}' (${field})`).join(' and ');
    return {
      field: unlisted[0]!,
      received: row.received[unlisted[0]!] ?? null,
      text: `Row ${row.row}: ${words} ${unlisted.length > 1 ? "aren't" : "isn't"} in the word list. We treat ${
        unlisted.length > 1 ? 'them' : 'it'
      } as unknown, marked as assumed. Use a word from the list to have it scored as given.`,
    };
  },
});

export const yearImpossible = rowRule({
  code: 'BLDG-03',
  severity: 'note',
  title: 'Year built can’t be right',
  check: (row, file) => {
    const received = row.received.year_built?.trim() ?? '';
    if (!received || /^(?:0|unknown|n\/?a|-)$/i.test(received) || yearBuiltOf(row, file.year) !== null) return null;
    const wrong =
      /^\d{4}$/.test(received) && Number(received) > file.year + 1 ? 'is in the future' : 'is not a year from 1700 on';
    return {
      field: 'year_built',
      received,
      text: `Row ${row.row}: year built ${receivedText(received)} ${wrong}. We treat the year as unknown.`,
    };
  },
});

export const tallWood = rowRule({
  code: 'BLDG-05',
  severity: 'note',
  title: 'Storeys and construction don’t go together',
  check: (row) => {
    const storeys = storeysOf(row);
    const frail = row.construction === 'light wood frame' || row.construction?.startsWith('manufactured home');
    if (storeys === null || storeys <= 7 || !frail) return null;
    return {
      field: 'storeys',
      received: row.received.storeys ?? null,
      text: `Row ${row.row}: ${storeys} storeys and ${row.construction} don't go together. We kept both; check one of them.`,
    };
  },
});

export const occupancyMissing = rowRule({
  code: 'BLDG-06',
  severity: 'note',
  title: 'Occupancy is missing',
  check: (row) =>
    row.occupancy === null && !isUnlisted(row.received.occupancy)
      ? {
          field: 'occupancy',
          received: row.received.occupancy ?? null,
          text: `Row ${row.row}: occupancy is missing. We treat it as unknown, marked as assumed.`,
        }
      : null,
});

export const terrainMissing = rowRule({
  code: 'BLDG-07',
  severity: 'note',
  title: 'Terrain is missing',
  check: (row) =>
    row.terrain === null && !isUnlisted(row.received.terrain)
      ? {
          field: 'terrain',
          received: row.received.terrain ?? null,
          text: `Row ${row.row}: terrain is missing. We assumed open terrain, where gusts are stronger than among houses or trees.`,
        }
      : null,
});
