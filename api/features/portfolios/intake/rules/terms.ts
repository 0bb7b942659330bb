import type { SiteRow } from '../file-row.ts';
import { receivedText } from '../numbers.ts';
import { rowRule } from '../rule.ts';

const received = (row: SiteRow) => row.received.deductible_value ?? null;

export const deductibleUnit = rowRule({
  code: 'TERM-01',
  severity: 'note',
  title: 'Deductible has no unit',
  check: (row, file) =>
    row.deductible.kind === 'no unit'
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
  check: (row) =>
    row.deductible.kind === 'no basis'
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
  check: (row) =>
    row.deductible.kind === 'unreadable'
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
  check: (row) =>
    row.limit.readable
      ? null
      : {
          field: 'site_limit',
          received: row.received.site_limit ?? null,
          text: `Row ${row.row}: limit '${receivedText(row.received.site_limit ?? '')}' isn't an amount we accept. No limit is applied and gross may be overstated.`,
        },
});
