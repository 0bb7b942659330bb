import type { FileFacts, SiteRow } from '../file-row.ts';
import { readAmount, readDecimal, receivedText, shareOf } from '../numbers.ts';
import { rowRule } from '../rule.ts';
import { deductibleKindNamed } from '../words.ts';

/** Below this a bare number may as well be a percentage. */
const SURELY_MONEY = 100;

export type Deductible =
  | { kind: 'none' }
  | { kind: 'applied'; minor: number }
  /** Not applied, and why: no unit, a percentage of something we don't hold, or not a number. */
  | { kind: 'no unit' | 'no basis' | 'unreadable' };

/** The deductible a row asks for, in minor units where it is an amount or a percentage of the site's own value. */
export function deductibleOf(row: SiteRow, facts: FileFacts): Deductible {
  const value = row.received.deductible_value?.trim() ?? '';
  const kindText = row.received.deductible_kind?.trim() ?? '';
  const kind = kindText === '' ? null : deductibleKindNamed(kindText);
  if (kind === 'none' || /^(?:|-|0+(?:[.,]0+)?\s*%?|n\/?a|none|nil)$/i.test(value)) return { kind: 'none' };
  const signed = /%\s*$/.test(value);
  const number = signed ? readDecimal(value.replace(/\s*%\s*$/, ''), facts.decimal) : null;
  if (signed && (number === null || number < 0 || number > 100)) return { kind: 'unreadable' };
  if (kind === 'percent of policy value' || kind === 'percent of limit') return { kind: 'no basis' };
  if (kind === 'percent of site value') {
    if (number !== null) return { kind: 'applied', minor: shareOf(row.tivMinor, number) };
    const bare = readDecimal(value, facts.decimal);
    if (bare === null || bare < 0 || bare > 100) return { kind: 'unreadable' };
    // 0.02 may be 2 % as a fraction or two hundredths of a percent.
    return bare <= 1 ? { kind: 'no unit' } : { kind: 'applied', minor: shareOf(row.tivMinor, bare) };
  }
  if (number !== null || kind === 'percent') return { kind: 'no basis' };
  const amount = readAmount(value, facts.decimal);
  if (amount.kind !== 'amount') return { kind: 'unreadable' };
  if (kind === null && amount.minor < SURELY_MONEY * 100) return { kind: 'no unit' };
  return { kind: 'applied', minor: amount.minor * facts.scale };
}

/** The site's limit in minor units; null when none is given or it can't be read. */
export function limitOf(row: SiteRow, facts: FileFacts): { minor: number | null; readable: boolean } {
  const amount = readAmount(row.received.site_limit, facts.decimal);
  if (amount.kind === 'blank') return { minor: null, readable: true };
  if (amount.kind !== 'amount') return { minor: null, readable: false };
  return { minor: amount.minor === 0 ? null : amount.minor * facts.scale, readable: true };
}

const received = (row: SiteRow) => row.received.deductible_value ?? null;

export const deductibleUnit = rowRule({
  code: 'TERM-01',
  severity: 'note',
  title: 'Deductible has no unit',
  check: (row, file) =>
    deductibleOf(row, file).kind === 'no unit'
      ? {
          field: 'deductible_value',
          received: received(row),
          text: `Row ${row.row}: deductible '${receivedText(received(row) ?? '')}' with no unit. Is it a percentage or an amount of ${file.currency}? Until it says so, no deductible is applied and gross is overstated.`,
        }
      : null,
});

export const deductibleBasis = rowRule({
  code: 'TERM-02',
  severity: 'note',
  title: 'Percentage deductible without a usable basis',
  check: (row, file) =>
    deductibleOf(row, file).kind === 'no basis'
      ? {
          field: 'deductible_kind',
          received: row.received.deductible_kind ?? received(row),
          text: `Row ${row.row}: a percentage deductible needs a basis — we can apply site value; policy value and limit aren't read yet. Until you choose, no deductible is applied and gross is overstated.`,
        }
      : null,
});

export const deductibleUnreadable = rowRule({
  code: 'TERM-05',
  severity: 'note',
  title: 'Deductible can’t be read',
  check: (row, file) =>
    deductibleOf(row, file).kind === 'unreadable'
      ? {
          field: 'deductible_value',
          received: received(row),
          text: `Row ${row.row}: deductible '${receivedText(received(row) ?? '')}' isn't an amount or a percentage from 0 to 100. No deductible is applied and gross is overstated.`,
        }
      : null,
});

export const limitUnreadable = rowRule({
  code: 'TERM-06',
  severity: 'note',
  title: 'Limit can’t be read',
  check: (row, file) =>
    limitOf(row, file).readable
      ? null
      : {
          field: 'site_limit',
          received: row.received.site_limit ?? null,
          text: `Row ${row.row}: limit '${receivedText(row.received.site_limit ?? '')}' isn't an amount we accept. No limit is applied and gross may be overstated.`,
        },
});
