import { amountsOf, VALUE_FIELDS, type FileFacts, type FileRow } from '../file-row.ts';
import { countText, moneyText, rowsText } from '../numbers.ts';
import { fileRule, surveyRule, type Finding, type Totals } from '../rule.ts';

/** Control totals tie when rows agree and TIV differs by no more than this share. */
const CONTROL_TOLERANCE = 0.001;

const counting = (facts: FileFacts) => (row: FileRow) => amountsOf(row.received, facts);

/** Whether a row stands on no place at all: a total line carries amounts only. */
const placeless = ({ received }: FileRow) =>
  !received.latitude && !received.longitude && !received.street && !received.postcode;

const SETTING_ASIDE = 'We set it aside.';

/**
 * Lines that aren't sites: blank lines, lines above the column names, lines labelled as totals, and lines whose
 * values equal the sum of all sites above them (or of those since the last such line).
 */
export const notASite = surveyRule({
  code: 'FILE-07',
  severity: 'set_aside',
  title: 'Totals, blank lines and lines above the table',
  survey: (rows, { facts }) => {
    const amounts = counting(facts);
    const found = new Map<number, Finding>();
    const since = { rows: 0, sums: new Map<string, number>() };
    const all = { rows: 0, sums: new Map<string, number>() };
    const ofSites = (row: FileRow) => {
      const { values, total, totalOnly } = amounts(row);
      const fields = totalOnly
        ? ([['total_value', total]] as const)
        : [...VALUE_FIELDS.map((field) => [field, values[field]] as const), ['total_value', total] as const];
      return fields.flatMap(([field, amount]) =>
        amount.kind === 'amount' && amount.minor > 0 ? [[field, amount.minor] as const] : [],
      );
    };
    // Sums are only needed where some row without a place might be one.
    const mayHoldSums = rows.some((row) => row.line === 'site' && placeless(row));
    rows.forEach((row, index) => {
      const text = lineText(row);
      if (text) {
        found.set(index, { field: null, received: null, text });
        return;
      }
      if (!mayHoldSums) return;
      const own = ofSites(row);
      const equals = (above: typeof all) =>
        above.rows >= 2 && own.length > 0 && own.every(([field, minor]) => above.sums.get(field) === minor);
      if (placeless(row) && (equals(all) || equals(since))) {
        found.set(index, {
          field: 'building_value',
          received: row.received.building_value ?? row.received.total_value ?? null,
          text: `Line ${row.row} looks like a total (its value equals the sum above). ${SETTING_ASIDE} Put it back if it is a real site.`,
        });
        since.rows = 0;
        since.sums.clear();
        return;
      }
      for (const above of [since, all]) {
        above.rows += 1;
        for (const [field, minor] of own) above.sums.set(field, (above.sums.get(field) ?? 0) + minor);
      }
    });
    return found;
  },
});

function lineText({ row, line }: FileRow): string | null {
  if (line === 'blank') return `Line ${row} is blank. ${SETTING_ASIDE}`;
  if (line === 'preamble') return `Line ${row} stands above the column names. ${SETTING_ASIDE}`;
  if (line === 'total') {
    return `Line ${row} looks like a total (it is labelled so and has no place). ${SETTING_ASIDE} Put it back if it is a real site.`;
  }
  return null;
}

export const decimalStyle = fileRule({
  code: 'FILE-03',
  severity: 'stop',
  title: 'Number style',
  judge: ({ decimal }) =>
    decimal.ambiguous
      ? `Some numbers read as decimal points and some as decimal commas${
          decimal.example ? ` (for example ${decimal.example})` : ''
        }. Choose the style and check again — nothing can be sealed until you confirm.`
      : null,
});

export const thousands = fileRule({
  code: 'FILE-05',
  severity: 'stop',
  title: 'Values may be in thousands',
  judge: ({ smallValues, thousandsHeader, scaleAnswered, facts }) => {
    if (scaleAnswered) return null;
    const question = `Are the values in thousands? Yes, multiply by 1,000 / No, they are in ${facts.currency}.`;
    if (thousandsHeader) return `The column '${thousandsHeader}' says thousands. ${question}`;
    return smallValues ? `Half of the building values are under 10,000 ${facts.currency}. ${question}` : null;
  },
});

/** Whether the totals a person expects and those read agree; null when none were given. */
function controlTies({
  expectedRows,
  expectedTivMinor,
  rowsRead,
  tivReadMinor,
}: Pick<Totals, 'expectedRows' | 'expectedTivMinor' | 'rowsRead' | 'tivReadMinor'>): boolean | null {
  if (expectedRows === null && expectedTivMinor === null) return null;
  const rowsTie = expectedRows === null || expectedRows === rowsRead;
  const tivTies =
    expectedTivMinor === null || Math.abs(expectedTivMinor - tivReadMinor) <= CONTROL_TOLERANCE * expectedTivMinor;
  return rowsTie && tivTies;
}

const inWords = (count: number) =>
  ['No', 'One', 'Two', 'Three', 'Four', 'Five', 'Six', 'Seven', 'Eight', 'Nine'][count] ?? countText(count);

export const controlTotals = fileRule({
  code: 'FILE-06',
  severity: 'blocks_sealing',
  title: 'Control totals don’t tie',
  judge: (totals) => {
    if (controlTies(totals) !== false) return null;
    const { expectedRows, expectedTivMinor, rowsRead, tivReadMinor } = totals;
    const expected = [
      ...(expectedRows === null ? [] : [rowsText(expectedRows)]),
      ...(expectedTivMinor === null ? [] : [moneyText(expectedTivMinor)]),
    ].join(' and ');
    const read = [
      ...(expectedRows === null ? [] : [rowsText(rowsRead)]),
      ...(expectedTivMinor === null ? [] : [moneyText(tivReadMinor)]),
    ].join(' and ');
    return `You told us to expect ${expected}. We read ${read}. ${differences(totals)} Check before you seal.`;
  },
});

function differences({ expectedRows, expectedTivMinor, rowsRead, tivReadMinor }: Totals): string {
  const rows = expectedRows === null ? 0 : expectedRows - rowsRead;
  const tiv = expectedTivMinor === null ? 0 : expectedTivMinor - tivReadMinor;
  const rowWords = rows === 0 ? null : `${inWords(Math.abs(rows))} ${Math.abs(rows) === 1 ? 'row' : 'rows'}`;
  const tivWords = tiv === 0 ? null : moneyText(Math.abs(tiv));
  if (rowWords && tivWords && rows > 0 === tiv > 0) {
    return `${rowWords} and ${tivWords} are ${rows > 0 ? 'missing' : 'too many'}.`;
  }
  const say = (words: string, excess: number, single: boolean) =>
    `${words} ${single ? 'is' : 'are'} ${excess > 0 ? 'missing' : 'too many'}.`;
  return [
    ...(rowWords ? [say(rowWords, rows, Math.abs(rows) === 1)] : []),
    ...(tivWords ? [say(tivWords, tiv, true)] : []),
  ].join(' ');
}

export const currencies = fileRule({
  code: 'FILE-08',
  severity: 'note',
  title: 'More than one currency',
  judge: ({ otherCurrencies, facts }) =>
    otherCurrencies.length === 0
      ? null
      : `The file holds ${otherCurrencies.length === 1 ? 'two currencies' : 'several currencies'}, ${[
          facts.currency,
          ...otherCurrencies,
        ].join(
          ' and ',
        )}. Rows in ${otherCurrencies.join(' and ')} are held: we don't convert, and totals never mix currencies. Upload them as a portfolio of their own.`,
});

export const deductibleUnmapped = fileRule({
  code: 'TERM-07',
  severity: 'note',
  title: 'No deductible',
  judge: ({ facts }) =>
    facts.mapped.includes('deductible_value')
      ? null
      : 'No column holds a deductible. None is applied, so gross is overstated where policies carry one.',
});

const missing = (code: 'BLDG-01' | 'BLDG-06' | 'BLDG-07', attribute: string, name: string, assumption: string) =>
  fileRule({
    code,
    severity: 'note',
    title: `${name} is missing`,
    judge: ({ assumed, scoredTivMinor }) => {
      const count = assumed[attribute];
      if (!count || count.sites === 0) return null;
      const share = scoredTivMinor > 0 ? Math.round((100 * count.tivMinor) / scoredTivMinor) : 0;
      return `${name} is missing on ${rowsText(count.sites)} (${share} % of TIV). ${assumption}`;
    },
  });

export const constructionShare = missing(
  'BLDG-01',
  'construction',
  'Construction',
  "We will use the 'unknown' blend, marked as assumed.",
);
export const occupancyShare = missing(
  'BLDG-06',
  'occupancy',
  'Occupancy',
  'We treat it as unknown, marked as assumed.',
);
export const terrainShare = missing('BLDG-07', 'terrain', 'Terrain', 'We assumed open terrain, marked as assumed.');
