import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { saysThousands, suggestColumns } from '../../api/features/portfolios/intake/columns.ts';
import { readCoordinate } from '../../api/features/portfolios/intake/coordinates.ts';
import { moneyText, readAmount, shareOf } from '../../api/features/portfolios/intake/numbers.ts';
import { findHeader, sniffDelimiter } from '../../api/features/portfolios/intake/sniff.ts';
import { knownHeaders } from '../../api/features/portfolios/intake/columns.ts';
import { FileRefused, readTable, scanTable } from '../../api/features/portfolios/intake/table-file.ts';
import { constructionNamed } from '../../api/features/portfolios/intake/words.ts';
import { countryNamed } from '../../api/features/portfolios/intake/countries.ts';

describe('amounts', () => {
  it.each<[string, number]>([
    ['1234.56', 123456],
    ['1,234.56', 123456],
    ['$1,234', 123400],
    ['USD 1,234.5', 123450],
    ['1,234 USD', 123400],
    ['US$ 5', 500],
    ['1 234 567', 123456700],
    ['0.29', 29],
    ['.5', 50],
    ['1.005', 101],
    ['1.004999', 100],
    ['12000000000.01', 1200000000001],
  ])('reads %s to the cent', (text, minor) => expect(readAmount(text)).toEqual({ kind: 'amount', minor }));
  it.each(['1.2m', '12k', '1e6', '12,34', '1,23,456', '=1+1', 'abc', '5,', '$', '1.2.3', '99999999999999999'])(
    'refuses %s rather than guess',
    (text) => expect(readAmount(text).kind).toBe('unreadable'),
  );
  it.each(['', ' ', '-', '–', 'n/a', 'NIL'])('takes %j for blank', (text) =>
    expect(readAmount(text).kind).toBe('blank'),
  );
  it('reads decimal commas when told', () => {
    expect(readAmount('€1.234,56', 'comma')).toEqual({ kind: 'amount', minor: 123456 });
    expect(readAmount('1.234', 'comma')).toEqual({ kind: 'amount', minor: 123400 });
    expect(readAmount('1,234.56', 'comma').kind).toBe('unreadable');
  });
  it('reads back what it writes, whatever the amount', () =>
    fc.assert(
      fc.property(fc.nat(2 ** 31 - 1), fc.nat(99), fc.boolean(), (units, cents, negative) => {
        const minor = (units * 100 + cents) * (negative ? -1 : 1);
        const read = readAmount(moneyText(minor));
        expect('minor' in read ? read.minor : null).toBe(minor === 0 ? 0 : minor);
        expect(read.kind).toBe(negative && minor !== 0 ? 'negative' : 'amount');
      }),
    ));
  it('takes percentages exactly, half up', () => {
    expect(shareOf(250_000_000, 3)).toBe(7_500_000);
    expect(shareOf(1, 50)).toBe(1);
    expect(shareOf(999_999_999_999_999, 0.1)).toBe(1_000_000_000_000);
  });
});

describe('coordinates', () => {
  it.each<[string, 'latitude' | 'longitude', number]>([
    ['-80.19', 'longitude', -80.19],
    ['80.19 W', 'longitude', -80.19],
    ['N25.5', 'latitude', 25.5],
    ['25°46′N', 'latitude', 25 + 46 / 60],
    ['80°11\'30"W', 'longitude', -(80 + 11 / 60 + 30 / 3600)],
    ['25 46 30 S', 'latitude', -(25 + 46 / 60 + 30 / 3600)],
    ['−80.19', 'longitude', -80.19],
  ])('reads %s as %s', (text, axis, degrees) => expect(readCoordinate(text, axis, 'point')).toMatchObject({ degrees }));
  it.each<[string, 'latitude' | 'longitude']>([
    ['-25S', 'latitude'],
    ['25E', 'latitude'],
    ['25°61′N', 'latitude'],
    ['25d46m30s', 'latitude'],
    ['abc', 'longitude'],
    ['25,77', 'latitude'],
    ['N25N', 'latitude'],
  ])('refuses %s as %s', (text, axis) => expect(readCoordinate(text, axis, 'point').kind).toBe('unreadable'));
});

describe('columns', () => {
  it('are suggested whatever their case, spaces and punctuation, with a word of confidence', () => {
    const headers = [
      'SITE_ID',
      'Lat.',
      'long',
      'Bldg Value',
      'Contents (USD)',
      '# Stories',
      'Notes to broker',
      'Year-Built',
      'id',
    ];
    expect(suggestColumns(headers).map((known) => known && [known.field, known.confidence])).toEqual([
      ['site_ref', 'sure'],
      ['latitude', 'sure'],
      ['longitude', 'sure'],
      ['building_value', 'sure'],
      ['contents_value', 'likely'],
      ['storeys', 'sure'],
      null,
      ['year_built', 'sure'],
      null,
    ]);
  });
  it('say thousands in several ways', () => {
    for (const header of ["Building ('000)", 'TIV (k)', 'Contents in thousands', 'Value 000s', '$k'])
      expect(saysThousands(header), header).toBe(true);
    for (const header of ['Building value', 'Zip 33000', 'Kind', 'Value 10,000'])
      expect(saysThousands(header), header).toBe(false);
  });
});

it('knows words and countries under many names', () => {
  expect([
    constructionNamed('CBS'),
    constructionNamed('conc blk'),
    constructionNamed('Wood-Frame'),
    constructionNamed('adobe'),
  ]).toEqual(['reinforced masonry', 'reinforced masonry', 'light wood frame', null]);
  expect(
    ['US', 'usa', 'United States of America', 'Viet Nam', 'Atlantis'].map((name) => countryNamed(name)?.code ?? null),
  ).toEqual(['US', 'US', 'US', 'VN', null]);
});

describe('tables', () => {
  it.each([',', ';', '\t', '|'])('are cut at %j even when cells hold other signs', (delimiter) => {
    const line = (cells: string[]) => cells.join(delimiter);
    const text = [
      line(['Ref', 'Lat', 'Value']),
      line(['S-1', '26.1', delimiter === ',' ? '"1,200;300"' : '1,200']),
      line(['S-2', '26.2', '7']),
    ].join('\n');
    expect(sniffDelimiter(text)).toEqual({ delimiter, columns: 3 });
  });
  it('have their header found below titles, and by its shape when no word is known', () => {
    expect(findHeader([['Schedule of values'], [''], ['Loc id', 'Lat', 'Lon'], ['1', '2', '3']], knownHeaders)).toBe(2);
    expect(
      findHeader(
        [
          ['Ort', 'Breite'],
          ['A', '12.5'],
        ],
        knownHeaders,
      ),
    ).toBe(0);
    expect(
      findHeader(
        [
          ['1', '2'],
          ['3', '4'],
        ],
        knownHeaders,
      ),
    ).toBeNull();
  });

  const pieces = async function* (bytes: Buffer, size: number) {
    for (let at = 0; at < bytes.length; at += size) yield bytes.subarray(at, at + size);
  };
  const scan = (bytes: Buffer, size = 65_536) => scanTable(pieces(bytes, size), async () => undefined);

  it('are read the same however the bytes arrive', async () => {
    const text = 'Ref,Name,Lat\r\nS-1,"é, ""quoted""\r\nover two lines",1\r\nS-2,ж€𝄞,2\r\n';
    for (const encoding of ['utf8', 'utf16le'] as const) {
      const bytes = Buffer.from(`\ufeff${text}`, encoding);
      for (const size of [1, 2, 3, 7, 64, 4096]) {
        const table = await scan(bytes, size);
        const records: string[][] = [];
        await readTable(pieces(bytes, size), table.style, table.headers.length, (record, line) =>
          records.push([String(line), ...record]),
        );
        expect(records).toEqual([
          ['1', 'Ref', 'Name', 'Lat'],
          ['2', 'S-1', 'é, "quoted"\r\nover two lines', '1'],
          ['3', 'S-2', 'ж€𝄞', '2'],
        ]);
      }
    }
  });
  it('fall back to Windows-1252 when a byte late in the file isn’t UTF-8', async () => {
    const bytes = Buffer.concat([
      Buffer.from('Ref,Name,Lat\n'),
      Buffer.from('S-1,plain,1\n'.repeat(40_000)),
      Buffer.from('S-2,Caf\xe9,2\n', 'latin1'),
    ]);
    const table = await scan(bytes);
    expect(table).toMatchObject({ rows: 40_001, style: { encoding: 'windows-1252' } });
    let last: string[] = [];
    await readTable(pieces(bytes, 65_536), table.style, 3, (record) => (last = record));
    expect(last).toEqual(['S-2', 'Café', '2']);
  });
  it('count blank lines, and no line for a line break at the end', async () => {
    expect((await scan(Buffer.from('Ref,Lat\nS-1,1\n\nS-2,2'))).rows).toBe(3);
    expect((await scan(Buffer.from('Ref,Lat\rS-1,1\rS-2,2\r'))).rows).toBe(2);
  });
  it('are refused over the limit of rows, with the figure', async () => {
    const limits = { bytes: 1e6, rows: 1_000, columns: 20, cell: 50 };
    const bytes = Buffer.from(`Ref,Lat\n${'S-1,1\n'.repeat(1_234)}`);
    const refusal = scanTable(pieces(bytes, 65_536), async () => undefined, limits);
    await expect(refusal).rejects.toThrow('This file has 1,234 rows. The limit is 1,000.');
    await expect(refusal).rejects.toBeInstanceOf(FileRefused);
  });
  it('are refused while they arrive once they pass the limit of bytes, whatever was announced', async () => {
    let sent = 0;
    const endless = (async function* () {
      for (;;) {
        sent += 1;
        yield Buffer.from('S-1,1\n'.repeat(1_000));
      }
    })();
    await expect(
      scanTable(endless, async () => undefined, { bytes: 1024 * 1024, rows: 1e6, columns: 20, cell: 50 }),
    ).rejects.toThrow('This file is more than 1 MB. The limit is 1 MB.');
    expect(sent).toBeLessThan(200);
  });
});
