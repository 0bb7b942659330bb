import { describe, expect, it } from 'vitest';
import type { SiteField } from '#contract/portfolios.ts';
import { FileSummary, prepareCheck, type Answers } from '../../api/features/portfolios/intake/check.ts';
import type { FileRow, LineKind, Received } from '../../api/features/portfolios/intake/file-row.ts';
import type { JudgedRow } from '../../api/features/portfolios/intake/judge.ts';
import { FILE_RULES, ROW_RULES, SURVEY_RULES } from '../../api/features/portfolios/intake/rules.ts';

const SOUND: Received = {
  latitude: '26.640001',
  longitude: '-81.800001',
  country: 'US',
  building_value: '1,000,000',
  contents_value: '250000.50',
  construction: 'CBS',
  occupancy: 'Hotel',
  terrain: 'Suburban',
  location_quality: 'building',
  deductible_kind: '% of site value',
  deductible_value: '2%',
};
const MAPPED: SiteField[] = [
  'site_ref',
  'latitude',
  'longitude',
  'country',
  'building_value',
  'contents_value',
  'total_value',
  'currency',
  'construction',
  'occupancy',
  'terrain',
  'location_quality',
  'deductible_kind',
  'deductible_value',
  'street',
  'year_built',
  'storeys',
  'site_limit',
];
const ANSWERS: Answers = { currency: 'USD', decimal: null, scale: null, expectedRows: null, expectedTivMinor: null };
const AT_SEA = new Map([
  ['27.500001', 14_100],
  ['26.500001', 3_200],
]);
const offshoreM = (latitude: number) => AT_SEA.get(latitude.toFixed(6)) ?? 0;

type Line = Partial<Received> | LineKind;
/** Judges lines beside sound rows 2 to 9, which make the file's region; the lines tested begin at row 10. */
const judge = (lines: Line[], answers: Partial<Answers> = {}, mapped = MAPPED, base: Received = SOUND) => {
  const neighbours = Array.from({ length: 8 }, (_, i): Received => ({
    ...base,
    site_ref: `N-${i}`,
    latitude: `26.6${i}0001`,
    building_value: `${900_000 + i}`,
  }));
  const rows = [...neighbours, ...lines].map((line, index): FileRow => {
    const row = index + 2;
    if (typeof line === 'string') return { row, line, received: line === 'total' ? { building_value: '5' } : {} };
    const merged = { ...(index < 8 ? {} : { ...base, site_ref: `S-${row}` }), ...line };
    const received = Object.fromEntries(Object.entries(merged).filter(([, cell]) => cell !== '')) as Received;
    return { row, line: 'site', received };
  });
  const all = { ...ANSWERS, ...answers };
  const prepared = prepareCheck(rows, mapped, all, 2026, offshoreM);
  const summary = new FileSummary(prepared, all, null);
  const judged = rows.map((row, index) => summary.judge(row, index).judged);
  return { judged: judged.slice(8), ...summary.finish() };
};
const one = (line: Line, answers: Partial<Answers> = {}): JudgedRow => judge([line], answers).judged[0]!;
const texts = (row: JudgedRow) => Object.fromEntries(row.messages.map(({ code, text }) => [code, text]));

it('finds nothing in a sound row', () => {
  expect(one({})).toMatchObject({
    state: 'ready',
    messages: [],
    tivMinor: 125_000_050,
    quality: 'building',
    assumed: [],
  });
});

describe.each<[string, Partial<Received>, JudgedRow['state'], string]>([
  [
    'PLACE-01',
    { latitude: '', longitude: '' },
    'held',
    "Row 10: no latitude or longitude. The site can't be scored. Add coordinates, place it on the map, or exclude it with a reason.",
  ],
  [
    'PLACE-01',
    { longitude: '' },
    'held',
    "Row 10: no longitude. The site can't be scored. Add coordinates, place it on the map, or exclude it with a reason.",
  ],
  [
    'PLACE-02',
    { latitude: '-80.19', longitude: '25.77' },
    'held',
    'Row 10: latitude −80.19 and longitude 25.77 look swapped — reversed, they fall in the United States like the rest of this file. Swap them?',
  ],
  [
    'PLACE-02',
    { latitude: '-81.5', longitude: '26.7', country: '' },
    'held',
    'Row 10: latitude −81.5 and longitude 26.7 look swapped — reversed, they fall among the other sites of this file. Swap them?',
  ],
  [
    'PLACE-02',
    { latitude: '81.5', longitude: '26.7', country: '' },
    'held',
    'Row 10: latitude 81.5 and longitude 26.7 look swapped — reversed, they fall among the other sites of this file. Swap them?',
  ],
  [
    'PLACE-03',
    { longitude: '80.13' },
    'held',
    'Row 10: longitude 80.13 is east of Greenwich, but the country is US. Did it lose its minus sign?',
  ],
  [
    'PLACE-03',
    { longitude: '81.5', country: '' },
    'held',
    'Row 10: longitude 81.5 is east of Greenwich, but the rest of this file lies west of it. Did it lose its minus sign?',
  ],
  [
    'PLACE-04',
    { latitude: '0', longitude: '0.000' },
    'held',
    "Row 10: coordinates are 0, 0. That usually means 'not found'. The site is held.",
  ],
  [
    'PLACE-05',
    { latitude: '25°46′N', longitude: '80°12′W' },
    'notes',
    "Row 10: '25°46′N' was read as 25.76667. Check the value shown.",
  ],
  [
    'PLACE-06',
    { latitude: '2851004', longitude: '580123' },
    'held',
    'Row 10: 580123 / 2851004 look like metres on a map grid, not degrees. Tell us the grid or give degrees.',
  ],
  [
    'PLACE-07',
    { latitude: '27.500001' },
    'held',
    'Row 10: this point is 14.1 km offshore. Held until you confirm — is it a rig, a pier, or a typing slip?',
  ],
  [
    'PLACE-12',
    { latitude: '26.500001' },
    'notes',
    'Row 10: this point is 3.2 km off the coast we have on the map, which leaves out small barrier islands. We scored it. Check the point.',
  ],
  [
    'PLACE-08',
    { country: 'Japan', longitude: '-81.7' },
    'notes',
    'Row 10: the coordinates are outside Japan; the country says Japan. We kept the coordinates. Check the address.',
  ],
  [
    'PLACE-10',
    { latitude: '26.64', longitude: '-81.80' },
    'notes',
    'Row 10: two decimals is accurate to about 1 km. Location quality lowered from building to postcode.',
  ],
  [
    'PLACE-11',
    { latitude: 'north' },
    'held',
    "Row 10: latitude 'north' isn't a number we can read. The site can't be scored. Write decimal degrees, for example 25.76667.",
  ],
  [
    'PLACE-11',
    { latitude: '64.1', country: '' },
    'held',
    "Row 10: latitude 64.1 is outside −60 to 60. The site can't be scored. Check the value.",
  ],
  [
    'VALUE-01',
    { building_value: '0', contents_value: '' },
    'held',
    'Row 10: every value is zero or blank. There is nothing to score. Held.',
  ],
  [
    'VALUE-02',
    { building_value: '-250000' },
    'held',
    "Row 10: building value is −250,000. Values can't be negative. Held.",
  ],
  [
    'VALUE-02',
    { contents_value: '(1,000.50)' },
    'held',
    "Row 10: contents value is −1,000.50. Values can't be negative. Held.",
  ],
  ['VALUE-03', { building_value: '1.2m' }, 'held', "Row 10: '1.2m' is not a number we accept. Write 1200000."],
  [
    'VALUE-04',
    { total_value: '3,000,000', building_value: '2,500,000', contents_value: '250,000' },
    'notes',
    'Row 10: total 3,000,000 is not the sum of its parts (2,750,000). We used the parts.',
  ],
  [
    'VALUE-07',
    { total_value: '3,000,000', building_value: '', contents_value: '' },
    'notes',
    'Row 10: only a total is given, 3,000,000. We assumed that all of it is building value. Add the parts if you have them.',
  ],
  [
    'VALUE-08',
    { currency: 'BSD' },
    'held',
    "Row 10: the currency is BSD, the file is in USD. Totals never mix currencies and we don't convert, so its values count as zero here. Held.",
  ],
  [
    'TERM-01',
    { deductible_kind: '', deductible_value: '2' },
    'notes',
    "Row 10: deductible '2' with no unit. Is it a percentage or an amount of USD? Until it says so, no deductible is applied and gross is overstated.",
  ],
  [
    'TERM-02',
    { deductible_kind: '', deductible_value: '2%' },
    'notes',
    "Row 10: a percentage deductible needs a basis — we can apply site value; policy value and limit aren't read yet. Until you choose, no deductible is applied and gross is overstated.",
  ],
  [
    'TERM-05',
    { deductible_value: '150%' },
    'notes',
    "Row 10: deductible '150%' isn't an amount or a percentage from 0 to 100. No deductible is applied and gross is overstated.",
  ],
  [
    'TERM-06',
    { site_limit: 'full value' },
    'notes',
    "Row 10: limit 'full value' isn't an amount we accept. No limit is applied and gross may be overstated.",
  ],
  [
    'BLDG-01',
    { construction: '' },
    'notes',
    "Row 10: construction is missing. We will use the 'unknown' blend, marked as assumed.",
  ],
  [
    'BLDG-02',
    { construction: 'Coquina w/ trusses' },
    'notes',
    "Row 10: 'Coquina w/ trusses' (construction) isn't in the word list. We treat it as unknown, marked as assumed. Use a word from the list to have it scored as given.",
  ],
  [
    'BLDG-03',
    { year_built: '2062' },
    'notes',
    'Row 10: year built 2062 is in the future. We treat the year as unknown.',
  ],
  [
    'BLDG-05',
    { storeys: '60', construction: 'Wood frame' },
    'notes',
    "Row 10: 60 storeys and light wood frame don't go together. We kept both; check one of them.",
  ],
  ['BLDG-06', { occupancy: '' }, 'notes', 'Row 10: occupancy is missing. We treat it as unknown, marked as assumed.'],
  [
    'BLDG-07',
    { terrain: '' },
    'notes',
    'Row 10: terrain is missing. We assumed open terrain, where gusts are stronger than among houses or trees.',
  ],
  [
    'SAME-04',
    { site_ref: '' },
    'notes',
    "Row 10: no reference. We number it ROW-000010; a later upload can't be matched to it. Add a reference if you have one.",
  ],
])('%s for %j', (code, line, state, text) => {
  it('says what was seen, why it matters and what to do', () => {
    const row = one(line);
    expect(texts(row)[code]).toBe(text);
    expect(row.state).toBe(state);
    expect(row.codes).toContain(code);
  });
});

it('counts the rows with one pattern in each of their messages', () => {
  const { judged } = judge([
    { latitude: '-81.5', longitude: '26.7' },
    { latitude: '-81.6', longitude: '26.7' },
    { longitude: '81.4' },
    { longitude: '81.3' },
    { longitude: '81.2' },
  ]);
  expect(texts(judged[0]!)['PLACE-02']).toMatch(/Swap them\? 2 rows have the same pattern\.$/);
  expect(texts(judged[2]!)['PLACE-03']).toMatch(/minus sign\? 3 rows match\.$/);
});

it('finds swaps by the file’s own region on either hemisphere and across the date line', () => {
  const fiji = (line: Partial<Received>) =>
    judge([line], {}, MAPPED, { ...SOUND, country: '', longitude: '179.900001' }).judged[0]!;
  expect(fiji({ longitude: '-179.9' }).codes).toEqual([]);
  expect(fiji({ latitude: '179.9', longitude: '26.7' }).codes).toEqual(['PLACE-02']);
  const australia = judge([{ latitude: '147.1', longitude: '-19.3', country: 'Australia' }]).judged[0]!;
  expect(australia.codes).toEqual(['PLACE-02']);
});

it('sets exact repeats aside, holds conflicting references and only notes probable repeats', () => {
  const twin = { site_ref: 'T-1' };
  const { judged, tally } = judge([
    twin,
    twin,
    { site_ref: 'T-2', latitude: '26.7' },
    { site_ref: 'T-2', latitude: '26.8', longitude: '-81.2' },
    { site_ref: 'T-3' },
  ]);
  expect(judged.map(({ state }) => state)).toEqual(['ready', 'set_aside', 'held', 'held', 'notes']);
  expect(texts(judged[1]!)).toEqual({
    'SAME-01': 'Rows 10 and 11 are identical. We kept row 10 and set the other aside.',
  });
  expect(texts(judged[2]!)['SAME-02']).toBe(
    'Reference T-2 appears on rows 12 and 13 with different values. Both are held — choose one or rename.',
  );
  expect(texts(judged[4]!)['SAME-03']).toContain('same place, values and policy as row 10 under another reference');
  expect(tally.reconciliation.setAside).toEqual({ rows: 1, tivMinor: 125_000_050 });
});

it('sets totals, blank lines and lines above the table aside, without counting a total twice', () => {
  const neighbours = Array.from({ length: 8 }, (_, i) => 900_000 + i).reduce((a, b) => a + b, 0);
  const sum = {
    site_ref: 'All',
    latitude: '',
    longitude: '',
    building_value: String(neighbours),
    contents_value: String(8 * 250_000.5),
  };
  const { judged, tally } = judge([sum, 'blank', 'total', 'preamble', { latitude: '', longitude: '' }]);
  expect(judged.map(({ codes }) => codes[0])).toEqual(['FILE-07', 'FILE-07', 'FILE-07', 'FILE-07', 'PLACE-01']);
  expect(texts(judged[0]!)['FILE-07']).toBe(
    'Line 10 looks like a total (its value equals the sum above). We set it aside. Put it back if it is a real site.',
  );
  expect(tally.reconciliation.setAside).toEqual({ rows: 4, tivMinor: 0 });
});

it('treats sites with different addresses at one point as postcode quality', () => {
  const { judged } = judge(
    Array.from({ length: 5 }, (_, i) => ({
      street: `${i} Heron Road`,
      building_value: `${500_000 + i}`,
      latitude: '26.900001',
    })),
  );
  expect(judged.map(({ quality }) => quality)).toEqual(Array(5).fill('postcode'));
  expect(texts(judged[0]!)['PLACE-09']).toBe(
    'Rows 10–14: 5 sites with different addresses share one point. We treat them as postcode quality; gusts are shown as a range.',
  );
});

describe('the file as a whole', () => {
  const text = (code: string, messages: { code: string; text: string }[]) =>
    messages.find((message) => message.code === code)?.text;
  it('compares control totals, letting a thousandth pass in value and none in rows', () => {
    const { survey } = judge([{}]);
    const totals = (expectedRows: number | null, expectedTivMinor: number | null) =>
      text('FILE-06', judge([{}], { expectedRows, expectedTivMinor }).messages);
    expect(totals(null, null)).toBeUndefined();
    expect(totals(9, Math.round(survey.tivReadMinor * 1.0009))).toBeUndefined();
    expect(totals(9, Math.round(survey.tivReadMinor * 1.002))).toContain('You told us to expect 9 rows and');
    expect(totals(10, null)).toBe(
      'You told us to expect 10 rows. We read 9 rows. One row is missing. Check before you seal.',
    );
    expect(totals(8, null)).toBe(
      'You told us to expect 8 rows. We read 9 rows. One row is too many. Check before you seal.',
    );
  });
  it('asks about thousands and never scales alone', () => {
    const small = { ...SOUND, building_value: '900', contents_value: '' };
    const rows = judge(
      [small, small].map((line, i) => ({ ...line, site_ref: `k${i}` })),
      {},
      MAPPED,
      small,
    );
    expect(text('FILE-05', rows.messages)).toBeUndefined();
    const all = prepareCheck(
      Array.from({ length: 3 }, (_, i): FileRow => ({
        row: i + 2,
        line: 'site',
        received: { ...small, site_ref: `k${i}` },
      })),
      MAPPED,
      ANSWERS,
      2026,
      offshoreM,
    );
    expect(all.smallValues).toEqual({ rows: 3, median: 90_000 });
  });
  it('reads decimal commas where the cells allow one reading, and asks where they allow two', () => {
    const comma = {
      ...SOUND,
      latitude: '26,640001',
      longitude: '-81,800001',
      building_value: '1.000.000,50',
      contents_value: '',
    };
    const read = (line: Received, answers: Partial<Answers> = {}) => {
      const rows = [0, 1].map((i): FileRow => ({ row: i + 2, line: 'site', received: { ...line, site_ref: `c${i}` } }));
      const all = { ...ANSWERS, ...answers };
      const prepared = prepareCheck(rows, MAPPED, all, 2026, offshoreM);
      const summary = new FileSummary(prepared, all, null);
      const { judged } = summary.judge(rows[0]!, 0);
      return { judged, ...summary.finish() };
    };
    expect(read(comma).judged).toMatchObject({ latitude: 26.640001, longitude: -81.800001, tivMinor: 100_000_050 });
    const unclear = { ...comma, latitude: '', longitude: '', building_value: '1.234' };
    expect(read(unclear).messages.map(({ code }) => code)).toContain('FILE-03');
    expect(read(unclear, { decimal: 'comma' }).judged.tivMinor).toBe(123_400);
    expect(read(unclear, { decimal: 'comma' }).messages.map(({ code }) => code)).not.toContain('FILE-03');
  });
  it('tells the share of value that rests on assumptions', () => {
    expect(text('BLDG-01', judge([{ construction: '' }]).messages)).toMatch(
      /^Construction is missing on 1 row \(\d+ % of TIV\)\. /,
    );
  });
  it('says so when no column holds a deductible', () => {
    const without = MAPPED.filter((field) => !field.startsWith('deductible'));
    expect(text('TERM-07', judge([{}], {}, without).messages)).toContain('gross is overstated');
  });
});

it('names every rule once, with a heading', () => {
  const rules = [...ROW_RULES, ...SURVEY_RULES];
  expect(new Set(rules.map(({ code }) => code)).size).toBe(rules.length);
  for (const { code, title, severity } of [...rules, ...FILE_RULES]) {
    expect(code).toMatch(/^(FILE|PLACE|VALUE|TERM|BLDG|SAME)-\d\d$/);
    expect(title.length, `${code} ${severity}`).toBeGreaterThan(8);
  }
});
