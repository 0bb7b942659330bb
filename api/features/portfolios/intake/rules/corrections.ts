import type { Fix } from '#contract/portfolios.ts';
import { degreesText } from '../coordinates.ts';
import type { Correction, SiteRow } from '../file-row.ts';
import { receivedText } from '../numbers.ts';
import { rowRule } from '../rule.ts';

const correctionOf = (row: SiteRow, kind: Fix, codes?: readonly string[]): Correction | undefined =>
  row.corrections.find((correction) => correction.kind === kind && (!codes || codes.includes(correction.code)));

const asReceived = ({ received }: SiteRow) =>
  `${receivedText(received.latitude ?? '')} / ${receivedText(received.longitude ?? '')}`;
const now = ({ latitude, longitude }: SiteRow) =>
  [latitude, longitude]
    .map((coordinate) => (coordinate.kind === 'degrees' ? degreesText(coordinate.degrees) : '?'))
    .join(' / ');

/** A correction shows as a message of its own, so that corrected rows are listed and counted like any others. */
export const swappedBack = rowRule({
  code: 'PLACE-21',
  severity: 'note',
  title: 'Corrected: latitude and longitude swapped',
  check: (row) => {
    const correction = correctionOf(row, 'swap_coordinates');
    if (!correction) return null;
    const text = `Row ${row.row}: corrected. Latitude and longitude were swapped, ${asReceived(row)} as received, now ${now(row)}. Reason: ${correction.reason}`;
    return { field: 'latitude', received: asReceived(row), text };
  },
});

export const signChanged = rowRule({
  code: 'PLACE-22',
  severity: 'note',
  title: 'Corrected: sign of the longitude changed',
  check: (row) => {
    const correction = correctionOf(row, 'negate_longitude');
    if (!correction) return null;
    const text = `Row ${row.row}: corrected. The longitude changed its sign, ${asReceived(row)} as received, now ${now(row)}. Reason: ${correction.reason}`;
    return { field: 'longitude', received: row.received.longitude ?? null, text };
  },
});

export const confirmedAtSea = rowRule({
  code: 'PLACE-23',
  severity: 'note',
  title: 'Confirmed at sea',
  check: (row) => {
    const correction = correctionOf(row, 'keep_all', ['PLACE-07']);
    if (!correction) return null;
    const text = `Row ${row.row}: confirmed at sea, scored without terrain. Reason: ${correction.reason}`;
    return { field: 'latitude', received: asReceived(row), text };
  },
});

export const repeatKept = rowRule({
  code: 'SAME-21',
  severity: 'note',
  title: 'Repeats kept under a new reference',
  check: (row) => {
    const correction = correctionOf(row, 'keep_all', ['SAME-01']);
    if (!correction) return null;
    const text = `Row ${row.row}: repeats an earlier row and is kept as ${row.ref}. Reason: ${correction.reason}`;
    return { field: 'site_ref', received: row.received.site_ref ?? null, text };
  },
});

export const linePutBack = rowRule({
  code: 'FILE-21',
  severity: 'note',
  title: 'Lines put back as sites',
  check: (row) => {
    const correction = correctionOf(row, 'keep_all', ['FILE-07']);
    if (!correction) return null;
    return { field: null, received: null, text: `Row ${row.row}: put back as a site. Reason: ${correction.reason}` };
  },
});

export const excluded = rowRule({
  code: 'FILE-22',
  severity: 'set_aside',
  title: 'Excluded with a reason',
  check: (row) => {
    const correction = correctionOf(row, 'exclude');
    if (!correction) return null;
    const text = `Row ${row.row}: excluded because of ${correction.code}. It stays listed and isn't scored. Reason: ${correction.reason}`;
    return { field: null, received: null, text };
  },
});
