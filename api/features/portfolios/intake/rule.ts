import type { Fix, Severity, SiteField } from '#contract/portfolios.ts';
import type { Context, FileFacts, FileRow, SiteRow } from './file-row.ts';

/** What a rule has to say about one row; code and severity come from the rule. */
export interface Finding {
  field: SiteField | null;
  received: string | null;
  text: string;
}

interface RuleHead {
  code: string;
  severity: Severity;
  /** Heading of the group of all rows with this message. */
  title: string;
  /** The bulk fix on offer, with the words on its button. */
  fix?: { kind: Fix; label: (rows: number) => string };
}

/** Looks at one row with what is known of the file. */
export interface RowRule extends RuleHead {
  tests: 'row';
  check: (row: SiteRow, file: Context) => Finding | null;
}

/** Looks at all rows together and answers for some of them, by position. */
export interface SurveyRule extends RuleHead {
  tests: 'all rows';
  survey: (rows: readonly FileRow[], known: Survey) => Map<number, Finding>;
}

/** What earlier surveys of the same rows found, by position. */
export interface Survey {
  facts: FileFacts;
  /** Lines that aren't sites. */
  aside: ReadonlyMap<number, Finding>;
  /** Exact repeats, each with the position of the row it repeats. */
  repeats: ReadonlyMap<number, number>;
}

/** What is known of a file once every row is judged. */
export interface Totals {
  facts: FileFacts;
  /** Rows and TIV read, lines set aside left out. */
  rowsRead: number;
  tivReadMinor: number;
  expectedRows: number | null;
  expectedTivMinor: number | null;
  scoredTivMinor: number;
  assumed: Readonly<Record<string, { sites: number; tivMinor: number }>>;
  /** Building values found, when they look as if they stood in thousands. */
  smallValues: { rows: number; median: number } | null;
  thousandsHeader: string | null;
  scaleAnswered: boolean;
  /** Evidence for the file's decimal sign, when the person hasn't chosen one. */
  decimal: { chosen: boolean; example: string | null; ambiguous: boolean };
  otherCurrencies: readonly string[];
}

/** Looks at the file as a whole and answers for it. */
export interface FileRule extends RuleHead {
  tests: 'file';
  judge: (totals: Totals) => string | null;
}

export type Rule = RowRule | SurveyRule | FileRule;

export const rowRule = (rule: Omit<RowRule, 'tests'>): RowRule => ({ tests: 'row', ...rule });
export const surveyRule = (rule: Omit<SurveyRule, 'tests'>): SurveyRule => ({ tests: 'all rows', ...rule });
export const fileRule = (rule: Omit<FileRule, 'tests'>): FileRule => ({ tests: 'file', ...rule });
