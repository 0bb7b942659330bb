import type { Reconciliation, RowState } from '#contract/portfolios.ts';
import {
  currencyOf,
  VALUE_FIELDS,
  type Context,
  type FileFacts,
  type FileRow,
  type Message,
  type Quality,
} from './file-row.ts';
import { factsOf, judgeRow, surveyRows, type JudgedRow, type Surveyed } from './judge.ts';
import { readAmount, type DecimalSign } from './numbers.ts';
import type { Totals } from './rule.ts';
import { FILE_RULES } from './rules.ts';
import type { SiteField } from '#contract/portfolios.ts';

/** What a person answered when mapping; null where the question is still open. */
export interface Answers {
  currency: string;
  decimal: DecimalSign | null;
  scale: 1 | 1000 | null;
  expectedRows: number | null;
  expectedTivMinor: number | null;
}

export interface DecimalEvidence {
  sign: DecimalSign;
  ambiguous: boolean;
  example: string | null;
}

const COMMA = /\d\.\d{3},\d+\D*$|^\D*\d+,\d{1,2}\D*$|\d\.\d{3}\.\d{3}/;
const POINT = /\d,\d{3}\.\d*\D*$|^\D*\d+\.\d{1,2}\D*$|\d,\d{3},\d{3}/;
const TRIPLE = /^\D*\d{1,3}\.\d{3}\D*$/;
/** Share of the rarer sign above which it is a second style rather than a few slips. */
const SECOND_STYLE = 0.2;

/** Which sign parts decimals in a file, from cells that can be read one way only. */
function decimalEvidence(rows: readonly FileRow[]): DecimalEvidence {
  let commas = 0;
  let points = 0;
  let triples = 0;
  let commaCell: string | null = null;
  let tripleCell: string | null = null;
  for (const { line, received } of rows) {
    if (line !== 'site') continue;
    for (const field of VALUE_FIELDS) {
      const cell = received[field];
      if (!cell) continue;
      if (COMMA.test(cell)) [commas, commaCell] = [commas + 1, commaCell ?? cell];
      else if (POINT.test(cell)) points++;
      else if (TRIPLE.test(cell)) [triples, tripleCell] = [triples + 1, tripleCell ?? cell];
    }
    for (const cell of [received.latitude, received.longitude]) {
      if (!cell) continue;
      if (/^\s*[-−]?\d+,\d+\s*$/.test(cell)) [commas, commaCell] = [commas + 1, commaCell ?? cell];
      else if (/^\s*[-−]?\d+\.\d+\s*$/.test(cell)) points++;
    }
  }
  const minority = Math.min(commas, points) / Math.max(1, commas + points);
  if (minority >= SECOND_STYLE) return { sign: 'point', ambiguous: true, example: commaCell };
  if (commas === 0 && points === 0 && triples > 0) return { sign: 'point', ambiguous: true, example: tripleCell };
  return { sign: commas > points ? 'comma' : 'point', ambiguous: false, example: null };
}

/** Currencies in which a building under 10,000 is more likely typed in thousands. */
const DOLLAR_LIKE = new Set([
  'USD',
  'EUR',
  'GBP',
  'AUD',
  'CAD',
  'NZD',
  'CHF',
  'SGD',
  'BSD',
  'BBD',
  'BMD',
  'KYD',
  'XCD',
  'BZD',
  'FJD',
]);
const SMALL_MINOR = 1_000_000;
const ENOUGH_ROWS = 20;

function smallValues(rows: readonly FileRow[], facts: FileFacts): Totals['smallValues'] {
  if (!DOLLAR_LIKE.has(facts.currency)) return null;
  const found: number[] = [];
  for (const row of rows) {
    const amount = readAmount(row.line === 'site' ? row.received.building_value : undefined, facts.decimal);
    if (amount.kind === 'amount' && amount.minor > 0) found.push(amount.minor * facts.scale);
  }
  if (found.length === 0) return null;
  const sorted = Float64Array.from(found).sort();
  const median = sorted[sorted.length >> 1]!;
  const small = sorted.length >= ENOUGH_ROWS ? median < SMALL_MINOR : sorted.at(-1)! < SMALL_MINOR;
  return small ? { rows: sorted.length, median } : null;
}

/** A file ready to be judged row by row. */
export interface PreparedCheck {
  context: Context;
  surveyed: ReadonlyMap<number, Surveyed[]>;
  decimal: DecimalEvidence;
  smallValues: Totals['smallValues'];
}

/** The part of the check that needs all rows at once. */
export function prepareCheck(
  rows: readonly FileRow[],
  mapped: SiteField[],
  answers: Answers,
  year: number,
  offshoreM: Context['offshoreM'],
): PreparedCheck {
  const decimal = decimalEvidence(rows);
  const facts = factsOf(rows, {
    currency: answers.currency,
    decimal: answers.decimal ?? decimal.sign,
    scale: answers.scale ?? 1,
    mapped,
    year,
  });
  return {
    context: { ...facts, offshoreM },
    surveyed: surveyRows(rows, facts),
    decimal,
    smallValues: smallValues(rows, facts),
  };
}

const SUM_LIMIT = Number.MAX_SAFE_INTEGER;

/** Sums over judged rows; the same whether they come from a check or from the stored rows. */
export interface Tally {
  reconciliation: Reconciliation;
  quality: { quality: Quality; sites: number; tivMinor: number }[];
  assumptions: { attribute: string; sites: number; tivMinor: number }[];
  assumedSites: number;
  assumedTivMinor: number;
}

const QUALITIES: readonly Quality[] = [
  'building',
  'parcel',
  'placed_by_hand',
  'street',
  'postcode',
  'town',
  'region',
  'unknown',
];
const KEY_OF: Record<RowState, 'ready' | 'notes' | 'held' | 'setAside'> = {
  ready: 'ready',
  notes: 'notes',
  held: 'held',
  set_aside: 'setAside',
};

/** Adds up judged rows. Throws RangeError when the sum passes what a whole number can hold exactly. */
export class Tallier {
  private readonly counts = { ready: none(), notes: none(), held: none(), setAside: none() };
  private readonly byQuality = new Map<Quality, { sites: number; tivMinor: number }>();
  private readonly byAttribute = new Map<string, { sites: number; tivMinor: number }>();
  private readonly assumed = { sites: 0, tivMinor: 0 };
  private fileTiv = 0;

  add(
    { state, tivMinor, quality, assumed }: Pick<JudgedRow, 'state' | 'tivMinor' | 'quality' | 'assumed'>,
    rows = 1,
  ): void {
    const count = this.counts[KEY_OF[state]];
    count.rows += rows;
    count.tivMinor += tivMinor;
    this.fileTiv += tivMinor;
    if (this.fileTiv > SUM_LIMIT) throw new RangeError('values add up beyond whole numbers');
    if (state !== 'ready' && state !== 'notes') return;
    const total = entry(this.byQuality, quality);
    total.sites += rows;
    total.tivMinor += tivMinor;
    for (const attribute of assumed) {
      const counted = entry(this.byAttribute, attribute);
      counted.sites += rows;
      counted.tivMinor += tivMinor;
    }
    if (assumed.length > 0) {
      this.assumed.sites += rows;
      this.assumed.tivMinor += tivMinor;
    }
  }

  tally(): Tally {
    const { ready, notes, held, setAside } = this.counts;
    return {
      reconciliation: {
        fileRows: ready.rows + notes.rows + held.rows + setAside.rows,
        tivMinor: this.fileTiv,
        ready,
        notes,
        held,
        setAside,
      },
      quality: QUALITIES.map((quality) => ({ quality, ...(this.byQuality.get(quality) ?? { sites: 0, tivMinor: 0 }) })),
      assumptions: [...this.byAttribute].map(([attribute, count]) => ({ attribute, ...count })),
      assumedSites: this.assumed.sites,
      assumedTivMinor: this.assumed.tivMinor,
    };
  }
}

const none = () => ({ rows: 0, tivMinor: 0 });
function entry<Key>(map: Map<Key, { sites: number; tivMinor: number }>, key: Key) {
  const known = map.get(key) ?? { sites: 0, tivMinor: 0 };
  map.set(key, known);
  return known;
}

/** What stays the same about a file however its rows are corrected. */
export interface FileSurvey {
  facts: FileFacts;
  decimal: DecimalEvidence;
  decimalAnswered: boolean;
  smallValues: Totals['smallValues'];
  thousandsHeader: string | null;
  scaleAnswered: boolean;
  otherCurrencies: string[];
  /** Rows and TIV read, lines set aside left out; a later exclusion doesn't change what was read. */
  rowsRead: number;
  tivReadMinor: number;
}

/** Messages about the file as a whole. */
export function fileMessages(
  survey: FileSurvey,
  tally: Tally,
  control: { expectedRows: number | null; expectedTivMinor: number | null },
): Message[] {
  const { ready, notes } = tally.reconciliation;
  const totals: Totals = {
    facts: survey.facts,
    rowsRead: survey.rowsRead,
    tivReadMinor: survey.tivReadMinor,
    ...control,
    scoredTivMinor: ready.tivMinor + notes.tivMinor,
    assumed: Object.fromEntries(
      tally.assumptions.map(({ attribute, sites, tivMinor }) => [attribute, { sites, tivMinor }]),
    ),
    smallValues: survey.smallValues,
    thousandsHeader: survey.thousandsHeader,
    scaleAnswered: survey.scaleAnswered,
    decimal: {
      ...survey.decimal,
      chosen: survey.decimalAnswered,
      ambiguous: survey.decimal.ambiguous && !survey.decimalAnswered,
    },
    otherCurrencies: survey.otherCurrencies,
  };
  return FILE_RULES.flatMap((rule) => {
    const text = rule.judge(totals);
    return text === null ? [] : [{ code: rule.code, severity: rule.severity, field: null, received: null, text }];
  });
}

/** Sums up a file while its rows are judged in order. */
export class FileSummary {
  private readonly tallier = new Tallier();
  private readonly currencies = new Set<string>();

  constructor(
    private readonly prepared: PreparedCheck,
    private readonly answers: Answers,
    private readonly thousandsHeader: string | null,
  ) {}

  /** Judges the row at a position of the prepared file and counts it. */
  judge(row: FileRow, index: number): { judged: JudgedRow; surveyed: readonly Surveyed[] } {
    const surveyed = this.prepared.surveyed.get(index) ?? [];
    const judged = judgeRow(row, this.prepared.context, surveyed, []);
    const currency = row.received.currency && judged.state === 'held' ? currencyOf(row.received) : null;
    if (currency && currency !== this.answers.currency) this.currencies.add(currency.slice(0, 10));
    this.tallier.add(judged);
    return { judged, surveyed };
  }

  finish(): { tally: Tally; survey: FileSurvey; messages: Message[] } {
    const tally = this.tallier.tally();
    const { fileRows, tivMinor, setAside } = tally.reconciliation;
    const { offshoreM: _coast, ...facts } = this.prepared.context;
    const survey: FileSurvey = {
      facts,
      decimal: this.prepared.decimal,
      decimalAnswered: this.answers.decimal !== null,
      smallValues: this.prepared.smallValues,
      thousandsHeader: this.thousandsHeader,
      scaleAnswered: this.answers.scale !== null,
      otherCurrencies: [...this.currencies].slice(0, 5),
      rowsRead: fileRows - setAside.rows,
      tivReadMinor: tivMinor - setAside.tivMinor,
    };
    return { tally, survey, messages: fileMessages(survey, tally, this.answers) };
  }
}
