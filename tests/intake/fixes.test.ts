import fc from 'fast-check';
import { expect, it } from 'vitest';
import type { Fix, SiteField } from '#contract/portfolios.ts';
import { FileSummary, prepareCheck, Tallier, type Answers } from '../../api/features/portfolios/intake/check.ts';
import type { Correction, FileRow, Received } from '../../api/features/portfolios/intake/file-row.ts';
import {
  judgeRow,
  resurveyReferences,
  type JudgedRow,
  type Surveyed,
} from '../../api/features/portfolios/intake/judge.ts';
import { ruleOf } from '../../api/features/portfolios/intake/rules.ts';

const MAPPED: SiteField[] = [
  'site_ref',
  'latitude',
  'longitude',
  'country',
  'building_value',
  'contents_value',
  'construction',
];
const ANSWERS: Answers = { currency: 'USD', decimal: 'point', scale: 1, expectedRows: null, expectedTivMinor: null };

const oneOf = <T>(...values: T[]) => fc.constantFrom(...values);
const cell = (...values: string[]) =>
  fc.oneof({ weight: 5, arbitrary: oneOf(values[0]!) }, { weight: 2, arbitrary: oneOf(...values) });
/** Rows good and bad, few enough different ones that repeats and conflicts come up often. */
const line: fc.Arbitrary<FileRow> = fc
  .record({
    line: fc.oneof(
      { weight: 12, arbitrary: oneOf('site' as const) },
      { weight: 1, arbitrary: oneOf('blank' as const, 'total' as const) },
    ),
    site_ref: oneOf('S-1', 'S-2', 'S-3', 'S-4', 'S-5', 'S-6', ''),
    latitude: cell('26.640001', '26.650001', '-81.8', '0', '', 'x', '27.5'),
    longitude: cell('-81.800001', '-81.810001', '26.64', '81.8', '0', ''),
    country: cell('US', '', 'Japan'),
    building_value: cell('1,000,000', '250000.55', '-5', '1.2m', '0', ''),
    contents_value: cell('', '99.99', '(7)', 'n/a'),
    construction: cell('CBS', '', 'adobe'),
  })
  .map(({ line: kind, ...cells }) => ({
    row: 0,
    line: kind,
    received: Object.fromEntries(
      Object.entries(cells).filter(([, text]) => text !== '' && kind !== 'blank'),
    ) as Received,
  }));
const step = fc.record({
  kind: oneOf<Fix | 'undo'>('swap_coordinates', 'negate_longitude', 'exclude', 'exclude', 'keep_all', 'undo'),
  share: fc.integer({ min: 1, max: 3 }),
  pick: fc.nat(1000),
});

interface Kept {
  row: FileRow;
  surveyed: Surveyed[];
  corrections: Correction[];
  judged: JudgedRow;
}

/** A draft kept in memory, fixed as the service fixes it: judged anew, then whoever shares a reference. */
class Draft {
  readonly rows: Kept[];
  private readonly context;
  private readonly fixes: { seq: number; rows: number[] }[] = [];

  constructor(rows: FileRow[]) {
    const prepared = prepareCheck(rows, MAPPED, ANSWERS, 2026, (latitude) => (latitude === 27.5 ? 9_000 : 0));
    const summary = new FileSummary(prepared, ANSWERS, null);
    this.context = prepared.context;
    this.rows = rows.map((row, index) => {
      const { judged, surveyed } = summary.judge(row, index);
      return { row, surveyed: [...surveyed], corrections: [], judged };
    });
  }

  apply(kind: Fix, share: number, pick: number): void {
    const states = kind === 'keep_all' ? ['held', 'set_aside'] : kind === 'exclude' ? ['held', 'notes'] : ['held'];
    const offered = new Map<string, number[]>();
    this.rows.forEach(({ row, judged }, index) => {
      if (row.line === 'blank' || !states.includes(judged.state)) return;
      for (const code of judged.codes) {
        // As the service refuses a fix that isn't the one on offer.
        if (kind !== 'exclude' && ruleOf(code)?.fix?.kind !== kind) continue;
        offered.set(code, [...(offered.get(code) ?? []), index]);
      }
    });
    const [code, rows] = [...offered][pick % Math.max(1, offered.size)] ?? [];
    if (!code) return;
    const seq = this.fixes.length + 1;
    const chosen = rows!.filter((_, index) => index % share === 0);
    this.fixes.push({ seq, rows: chosen });
    this.change(chosen, (before) => [...before, { seq, kind, code, reason: 'because' }]);
  }

  undo(): void {
    const last = this.fixes.pop();
    if (last) this.change(last.rows, (before) => before.filter(({ seq }) => seq !== last.seq));
  }

  undoAll(): void {
    while (this.fixes.length > 0) this.undo();
  }

  private change(chosen: number[], change: (before: Correction[]) => Correction[]): void {
    for (const index of chosen) this.judge(index, { corrections: change(this.rows[index]!.corrections) });
    const indexed = this.rows.map(({ row, surveyed, corrections }, index) => ({ row, surveyed, corrections, index }));
    for (const { index, surveyed } of resurveyReferences(indexed)) this.judge(index, { surveyed });
  }

  private judge(index: number, more: Partial<Kept>): void {
    const kept = { ...this.rows[index]!, ...more };
    this.rows[index] = { ...kept, judged: judgeRow(kept.row, this.context, kept.surveyed, kept.corrections) };
  }

  tally() {
    const tallier = new Tallier();
    for (const { judged } of this.rows) tallier.add(judged);
    return tallier.tally();
  }
}

const addsUp = (draft: Draft) => {
  const { fileRows, tivMinor, ready, notes, held, setAside } = draft.tally().reconciliation;
  expect(fileRows).toBe(draft.rows.length);
  expect(ready.rows + notes.rows + held.rows + setAside.rows).toBe(fileRows);
  expect(ready.tivMinor + notes.tivMinor + held.tivMinor + setAside.tivMinor).toBe(tivMinor);
};
/** Value as the file states it: every amount that can be read and isn't negative, once for each line that is a site. */
const stated = (rows: Kept[]) =>
  rows
    .filter(({ judged }) => !judged.codes.includes('FILE-07'))
    .flatMap(({ row: { received } }) => [received.building_value, received.contents_value])
    .reduce(
      (sum, text) => sum + ({ '1,000,000': 100_000_000, '250000.55': 25_000_055, '99.99': 9_999 }[text ?? ''] ?? 0),
      0,
    );
const tooManyForOneReference = (rows: Kept[]) => {
  const scored = rows
    .filter(({ judged }) => judged.state === 'ready' || judged.state === 'notes')
    .map(({ judged }) => judged.ref);
  return scored.length - new Set(scored).size;
};

it('loses no row and no cent, whatever is fixed and undone', () => {
  fc.assert(
    fc.property(fc.array(line, { minLength: 1, maxLength: 40 }), fc.array(step, { maxLength: 8 }), (lines, steps) => {
      const draft = new Draft(lines.map((row, index) => ({ ...row, row: index + 2 })));
      const before = structuredClone(draft.rows);
      addsUp(draft);
      for (const { kind, share, pick } of steps) {
        if (kind === 'undo') draft.undo();
        else draft.apply(kind, share, pick);
        addsUp(draft);
        expect(draft.tally().reconciliation.tivMinor).toBe(stated(draft.rows));
        expect(tooManyForOneReference(draft.rows)).toBe(0);
        for (const { judged } of draft.rows) {
          if (judged.state === 'ready') expect(judged.messages).toEqual([]);
          if (judged.state === 'ready' || judged.state === 'notes') {
            expect(judged.latitude).not.toBeNull();
            expect(judged.tivMinor).toBeGreaterThan(0);
          } else expect(judged.codes.length).toBeGreaterThan(0);
        }
      }
      draft.undoAll();
      expect(draft.rows).toEqual(before);
    }),
    { numRuns: 400 },
  );
});

it('counts the same however the lines of a file are ordered', () => {
  fc.assert(
    fc.property(fc.array(line, { minLength: 2, maxLength: 30 }), fc.nat(29), (lines, turn) => {
      // Totals are found by what stands above them, so their place matters.
      const sites = lines.filter(
        ({ line: kind, received }) => kind === 'site' && received.latitude && received.longitude,
      );
      const turned = [...sites.slice(turn % (sites.length || 1)), ...sites.slice(0, turn % (sites.length || 1))];
      const count = (rows: FileRow[]) => new Draft(rows.map((row, index) => ({ ...row, row: index + 2 }))).tally();
      const { reconciliation: first } = count(sites);
      const { reconciliation: second } = count(turned);
      expect(second.tivMinor).toBe(first.tivMinor);
      expect(second.setAside).toEqual(first.setAside);
      expect(second.held).toEqual(first.held);
    }),
    { numRuns: 150 },
  );
});
