import { createHash } from 'node:crypto';
import { amountsOf, VALUE_FIELDS, type FileFacts, type FileRow } from '../file-row.ts';
import { countText, rowsText } from '../numbers.ts';
import { rowRule, surveyRule, type Finding } from '../rule.ts';

/** Fingerprint of all mapped cells of a row; blanks and outer spaces don't tell rows apart. */
const contentOf = ({ received }: FileRow, facts: FileFacts): string => {
  let text = '';
  for (const field of facts.mapped) text += `${received[field]?.trim() ?? ''}\u0000`;
  return createHash('sha256').update(text).digest('base64');
};

const isBlank = (row: FileRow) => Object.keys(row.received).length === 0;

/** Positions of the rows that repeat an earlier one in every mapped cell, with the position of that first one. */
export function exactRepeats(
  rows: readonly FileRow[],
  facts: FileFacts,
  aside: ReadonlyMap<number, unknown>,
): Map<number, number> {
  const firsts = new Map<string, number>();
  const repeats = new Map<number, number>();
  rows.forEach((row, index) => {
    if (aside.has(index) || isBlank(row)) return;
    const content = contentOf(row, facts);
    const first = firsts.get(content);
    if (first === undefined) firsts.set(content, index);
    else repeats.set(index, first);
  });
  return repeats;
}

const listed = (rows: readonly number[]): string => {
  if (rows.length === 2) return `${rows[0]} and ${rows[1]}`;
  return rows.length <= 4
    ? `${rows.slice(0, -1).join(', ')} and ${rows.at(-1)}`
    : `${rows.slice(0, 3).join(', ')} and ${countText(rows.length - 3)} more`;
};

/** What a shared reference says on each of its rows; nothing when only one is left. */
export function conflictOf(ref: string, rows: readonly number[]): Finding | null {
  if (rows.length < 2) return null;
  const held = rows.length === 2 ? 'Both are held' : `All ${rows.length} are held`;
  return {
    field: 'site_ref',
    received: ref,
    text: `Reference ${ref} appears on rows ${listed(rows)} with different values. ${held} — choose one or rename.`,
  };
}

export const exactRepeat = surveyRule({
  code: 'SAME-01',
  severity: 'set_aside',
  title: 'Exact repeats of an earlier row',
  fix: { kind: 'keep_all', label: (rows) => `Keep ${rowsText(rows)}` },
  survey: (rows, { repeats }) => {
    const groups = new Map<number, number[]>();
    for (const [index, first] of repeats) {
      const group = groups.get(first);
      if (group) group.push(index);
      else groups.set(first, [first, index]);
    }
    const found = new Map<number, Finding>();
    for (const [first, group] of groups) {
      const numbers = group.map((index) => rows[index]!.row);
      const others = group.length === 2 ? 'the other aside' : 'the others aside';
      const text = `Rows ${listed(numbers)} are identical. We kept row ${rows[first]!.row} and set ${others}.`;
      for (const index of group.slice(1)) {
        found.set(index, { field: 'site_ref', received: rows[index]!.received.site_ref ?? null, text });
      }
    }
    return found;
  },
});

export const sharedReference = surveyRule({
  code: 'SAME-02',
  severity: 'hold',
  title: 'Same reference, different content',
  fix: { kind: 'exclude', label: (rows) => `Exclude ${rowsText(rows)}` },
  survey: (rows, { repeats, aside }) => {
    const byRef = new Map<string, number[]>();
    rows.forEach((row, index) => {
      const ref = row.received.site_ref?.trim();
      if (!ref || aside.has(index) || repeats.has(index)) return;
      const sharing = byRef.get(ref);
      if (sharing) sharing.push(index);
      else byRef.set(ref, [index]);
    });
    const found = new Map<number, Finding>();
    for (const [ref, sharing] of byRef) {
      const finding = conflictOf(
        ref,
        sharing.map((index) => rows[index]!.row),
      );
      if (finding) for (const index of sharing) found.set(index, finding);
    }
    return found;
  },
});

export const probableRepeat = surveyRule({
  code: 'SAME-03',
  severity: 'note',
  title: 'Probably repeats another row',
  survey: (rows, { facts, repeats, aside }) => {
    const firsts = new Map<string, number>();
    const found = new Map<number, Finding>();
    rows.forEach((row, index) => {
      const { latitude, longitude, policy_ref: policy, site_ref: ref } = row.received;
      if (!latitude || !longitude || aside.has(index) || repeats.has(index)) return;
      const { values } = amountsOf(row.received, facts);
      const amounts = VALUE_FIELDS.map((field) =>
        'minor' in values[field] ? values[field].minor : values[field].kind,
      );
      const key = [fiveDecimals(latitude), fiveDecimals(longitude), policy?.trim() ?? '', ...amounts].join(' ');
      const first = firsts.get(key);
      if (first === undefined) {
        firsts.set(key, index);
        return;
      }
      const earlier = rows[first]!;
      if (earlier.received.site_ref?.trim() === ref?.trim()) return;
      found.set(index, {
        field: 'site_ref',
        received: ref ?? null,
        text: `Row ${row.row}: same place, values and policy as row ${earlier.row} under another reference. We kept both, as flats and campuses can be alike. Check that it isn't entered twice.`,
      });
    });
    return found;
  },
});

const fiveDecimals = (text: string) => (Number.isFinite(Number(text)) ? Number(text).toFixed(5) : text.trim());

export const referenceMissing = rowRule({
  code: 'SAME-04',
  severity: 'note',
  title: 'Rows without a reference',
  check: (row) =>
    row.received.site_ref?.trim()
      ? null
      : {
          field: 'site_ref',
          received: null,
          text: `Row ${row.row}: no reference. We number it ${row.ref}; a later upload can't be matched to it. Add a reference if you have one.`,
        },
});
