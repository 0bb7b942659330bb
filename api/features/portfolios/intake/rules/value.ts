import { VALUE_FIELDS, type SiteRow, type ValueField } from '../file-row.ts';
import { moneyText, receivedText, rowsText } from '../numbers.ts';
import { rowRule } from '../rule.ts';

const excluding = { kind: 'exclude', label: (rows: number) => `Exclude ${rowsText(rows)}` } as const;
const named = (field: ValueField | 'total_value') => field.replaceAll('_', ' ');
/** Difference between a total and its parts that rounding explains. */
const TOTAL_TOLERANCE = 0.01;

const inWords = (text: string): string | null => {
  const match = /^[^\d]*(\d+(?:\.\d+)?)\s*(k|m|mn|mio|million|bn|thousand)\.?$/i.exec(text.trim());
  if (!match) return null;
  const power = /^k|^thousand/i.test(match[2]!) ? 1e3 : /^b/i.test(match[2]!) ? 1e9 : 1e6;
  return String(Math.round(Number(match[1]) * power));
};

export const nothingToScore = rowRule({
  code: 'VALUE-01',
  severity: 'hold',
  title: 'Every value is zero or blank',
  fix: excluding,
  check: (row) =>
    VALUE_FIELDS.every(
      (field) => row.values[field].kind === 'blank' || ('minor' in row.values[field] && row.values[field].minor === 0),
    ) &&
    row.total.kind !== 'unreadable' &&
    row.total.kind !== 'negative'
      ? {
          field: 'building_value',
          received: row.received.building_value ?? null,
          text: `Row ${row.row}: every value is zero or blank. There is nothing to score. Held.`,
        }
      : null,
});

const everyAmount = (row: SiteRow) =>
  [...VALUE_FIELDS, 'total_value' as const].map((field) => ({
    field,
    // The parts stand where a total of its own was taken as building value.
    amount: field === 'total_value' ? row.total : row.totalOnly ? ({ kind: 'blank' } as const) : row.values[field],
  }));

export const negative = rowRule({
  code: 'VALUE-02',
  severity: 'hold',
  title: 'A value is negative',
  fix: excluding,
  check: (row) => {
    const first = everyAmount(row).find(({ amount }) => amount.kind === 'negative');
    if (!first || first.amount.kind !== 'negative') return null;
    return {
      field: first.field,
      received: row.received[first.field] ?? null,
      text: `Row ${row.row}: ${named(first.field)} is ${moneyText(first.amount.minor)}. Values can't be negative. Held.`,
    };
  },
});

export const notANumber = rowRule({
  code: 'VALUE-03',
  severity: 'hold',
  title: 'A value isn’t a number we accept',
  fix: excluding,
  check: (row) => {
    const first = everyAmount(row).find(({ amount }) => amount.kind === 'unreadable');
    if (!first) return null;
    const received = row.received[first.field] ?? '';
    return {
      field: first.field,
      received,
      text: `Row ${row.row}: '${receivedText(received)}' is not a number we accept. Write ${inWords(received) ?? 'digits only, for example 1200000'}.`,
    };
  },
});

export const totalDiffers = rowRule({
  code: 'VALUE-04',
  severity: 'note',
  title: 'Total is not the sum of its parts',
  check: (row) => {
    if (row.total.kind !== 'amount' || row.totalOnly || row.tivMinor === 0) return null;
    if (Math.abs(row.total.minor - row.tivMinor) <= TOTAL_TOLERANCE * row.tivMinor) return null;
    return {
      field: 'total_value',
      received: row.received.total_value ?? null,
      text: `Row ${row.row}: total ${moneyText(row.total.minor)} is not the sum of its parts (${moneyText(row.tivMinor)}). We used the parts.`,
    };
  },
});

export const totalOnly = rowRule({
  code: 'VALUE-07',
  severity: 'note',
  title: 'Only a total is given',
  check: (row) =>
    row.totalOnly
      ? {
          field: 'total_value',
          received: row.received.total_value ?? null,
          text: `Row ${row.row}: only a total is given, ${moneyText(row.tivMinor)}. We assumed that all of it is building value. Add the parts if you have them.`,
        }
      : null,
});

export const anotherCurrency = rowRule({
  code: 'VALUE-08',
  severity: 'hold',
  title: 'Row is in another currency',
  fix: excluding,
  check: (row, file) =>
    row.otherCurrency
      ? {
          field: 'currency',
          received: row.received.currency ?? null,
          text: `Row ${row.row}: the currency is ${receivedText(row.otherCurrency)}, the file is in ${file.currency}. Totals never mix currencies and we don't convert, so its values count as zero here. Held.`,
        }
      : null,
});
