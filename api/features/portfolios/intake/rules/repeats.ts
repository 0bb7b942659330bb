import { amountsOf, VALUE_FIELDS, type FileFacts, type FileRow } from '../file-row.ts';
import { countText, rowsText } from '../numbers.ts';
import { pointKey } from '../point-key.ts';
import { rowRule, surveyRule, type Finding } from '../rule.ts';

/** All mapped cells of a row in one text; blanks and outer spaces don't tell rows apart. */
const contentOf = ({ received }: FileRow, facts: FileFacts): string => {
  let text = '';
  for (const field of facts.mapped) text += `${received[field]?.trim() ?? ''}\u0000`;
  return text;
};

/** A number of 53 bits for a text; only to find candidates, which are then compared in full. */
const fingerprint = (text: string): number => {
  let high = 0xdeadbeef;
  let low = 0x41c6ce57;
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    high = Math.imul(high ^ code, 2654435761);
    low = Math.imul(low ^ code, 1597334677);
  }
  return ((high >>> 0) & 0x1fffff) * 4294967296 + (low >>> 0);
};

const isBlank = (row: FileRow) => Object.keys(row.received).length === 0;

/** Positions of the rows that repeat an earlier one in every mapped cell, with the position of that first one. */
export function exactRepeats(
  rows: readonly FileRow[],
  facts: FileFacts,
  aside: ReadonlyMap<number, unknown>,
): Map<number, number> {
  const firsts = new Map<number, number>();
  const repeats = new Map<number, number>();
  rows.forEach((row, index) => {
    if (aside.has(index) || isBlank(row)) return;
    const content = contentOf(row, facts);
    // Different texts with one fingerprint take the next free number.
    for (let key = fingerprint(content); ; key++) {
      const first = firsts.get(key);
      if (first === undefined) {
        firsts.set(key, index);
        return;
      }
      if (contentOf(rows[first]!, facts) !== content) continue;
      repeats.set(index, first);
      return;
    }
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
    const firsts = new Map<string, number>();
    const byRef = new Map<string, number[]>();
    rows.forEach((row, index) => {
      const ref = row.received.site_ref?.trim();
      if (!ref || aside.has(index) || repeats.has(index)) return;
      const first = firsts.get(ref);
      if (first === undefined) {
        firsts.set(ref, index);
        return;
      }
      const sharing = byRef.get(ref);
      if (sharing) sharing.push(index);
      else byRef.set(ref, [first, index]);
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
    const terms = ({ received }: FileRow) => {
      const { values } = amountsOf(received, facts);
      const amounts = VALUE_FIELDS.map((field) =>
        'minor' in values[field] ? values[field].minor : values[field].kind,
      );
      return [received.policy_ref?.trim() ?? '', ...amounts].join(' ');
    };
    const byPoint = new Map<number, number>();
    const byTerms = new Map<string, number>();
    const found = new Map<number, Finding>();
    rows.forEach((row, index) => {
      const point = aside.has(index) || repeats.has(index) ? null : pointKey(row.received);
      if (point === null) return;
      // Most points stand alone; only those that come again have their values compared.
      const sharing = byPoint.get(point);
      if (sharing === undefined) {
        byPoint.set(point, index);
        return;
      }
      const before = `${point} ${terms(rows[sharing]!)}`;
      if (!byTerms.has(before)) byTerms.set(before, sharing);
      const key = `${point} ${terms(row)}`;
      const first = byTerms.get(key);
      if (first === undefined) {
        byTerms.set(key, index);
        return;
      }
      const ref = row.received.site_ref;
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
