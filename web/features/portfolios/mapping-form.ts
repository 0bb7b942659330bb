import type { z } from 'zod';
import type { Column, Edition, Mapping, SiteField } from '#contract/portfolios.ts';
import { exactAmount, minorPerUnit } from '../../lib/money.ts';
import { FIELD_NAMES, VALUE_FIELDS } from './field-names.ts';

/** What the person sees while mapping; turned into a request at submit. */
export interface MappingForm {
  /** Sign that parts the decimals; null lets the cells decide. */
  decimal: 'point' | 'comma' | null;
  /** Answered only by a person. */
  valuesIn: 'units' | 'thousands' | null;
  fields: ReadonlyMap<number, SiteField>;
  currency: string;
  expectedRows: string;
  expectedTiv: string;
}

const CONFIDENCE_ORDER = { sure: 0, likely: 1, guess: 2 };

/** The saved mapping, or the suggestions, the surest first; a field already taken isn't suggested twice. */
export const startingForm = (edition: Edition): MappingForm => {
  const fields = new Map<number, SiteField>();
  if (edition.columns.some(({ field }) => field !== null)) {
    for (const { index, field } of edition.columns) if (field) fields.set(index, field);
  } else {
    const suggested = edition.columns
      .filter(
        (column): column is Column & { suggestion: NonNullable<Column['suggestion']> } => column.suggestion !== null,
      )
      .sort((a, b) => CONFIDENCE_ORDER[a.suggestion.confidence] - CONFIDENCE_ORDER[b.suggestion.confidence]);
    const taken = new Set<SiteField>();
    for (const { index, suggestion } of suggested) {
      if (taken.has(suggestion.field)) continue;
      taken.add(suggestion.field);
      fields.set(index, suggestion.field);
    }
  }
  const { expectedRows, expectedTivMinor } = edition.control;
  return {
    fields,
    decimal: null,
    valuesIn: null,
    currency: edition.currency,
    expectedRows: expectedRows === null ? '' : String(expectedRows),
    expectedTiv: expectedTivMinor === null ? '' : exactAmount(expectedTivMinor, edition.currency),
  };
};

/** The mapping in force, sent again with an answer to a question about the whole file. */
export const mappingWith = (
  edition: Edition,
  answer: Partial<Pick<MappingForm, 'decimal' | 'valuesIn'>>,
): z.input<typeof Mapping> => ({
  columns: edition.columns.flatMap(({ index, field }) => (field ? [{ index, field }] : [])),
  currency: edition.currency,
  expectedRows: edition.control.expectedRows,
  expectedTivMinor: edition.control.expectedTivMinor,
  // A style the cells already told stays; only an open question may change it.
  decimal: edition.messages.some(({ code }) => code === 'FILE-03') ? null : (edition.style.decimal ?? null),
  ...answer,
});

const quoted = (names: readonly string[]) => names.map((name) => `“${name}”`).join(' and ');

/** Fields that two or more columns claim, with the sentence to say. */
export const doubleClaims = (form: MappingForm, columns: readonly Column[]): Map<SiteField, string> => {
  const claims = new Map<SiteField, string[]>();
  for (const column of columns) {
    const field = form.fields.get(column.index);
    if (field) claims.set(field, [...(claims.get(field) ?? []), column.name]);
  }
  return new Map(
    [...claims]
      .filter(([, names]) => names.length > 1)
      .map(([field, names]) => [
        field,
        `${names.length === 2 ? 'Two' : 'Several'} columns are mapped to ${FIELD_NAMES[field].toLowerCase()}: ${quoted(names)}. Choose one.`,
      ]),
  );
};

/** What will hold rows, said before the checks say it row by row. */
export const mappingWarnings = (form: MappingForm): string[] => {
  const mapped = new Set(form.fields.values());
  const warnings: string[] = [];
  if (!mapped.has('latitude') || !mapped.has('longitude'))
    warnings.push('No column holds latitude and longitude. Every row will be held until it has a place.');
  if (!VALUE_FIELDS.some((field) => mapped.has(field)))
    warnings.push('No column holds a value. Every row will be held: there is nothing to score.');
  if (!mapped.has('deductible_kind') && !mapped.has('deductible_value') && !mapped.has('site_limit'))
    warnings.push('No policy terms are mapped. Gross will equal ground-up.');
  return warnings;
};

const plainNumber = (text: string): number | null => {
  const stripped = text.replaceAll(/[\s,'’]/g, '');
  return /^\d+(\.\d+)?$/.test(stripped) ? Number(stripped) : null;
};

export type Entered = { value: number | null; error?: undefined } | { value?: undefined; error: string };

/** An expected number of rows as typed; empty means "not given". */
export const readExpectedRows = (text: string): Entered => {
  if (text.trim() === '') return { value: null };
  const rows = plainNumber(text);
  return rows === null || !Number.isInteger(rows)
    ? { error: 'Write a whole number of sites, for example 1,953.' }
    : { value: rows };
};
/** An expected TIV as typed, in minor units; empty means "not given". */
export const readExpectedTiv = (text: string, currency: string): Entered => {
  if (text.trim() === '') return { value: null };
  const units = plainNumber(text);
  return units === null
    ? { error: 'Write the total in figures, for example 4,812,604,310.00.' }
    : { value: Math.round(units * minorPerUnit(currency)) };
};
