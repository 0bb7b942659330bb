import { createHash } from 'node:crypto';
import { parse, CsvError, type Parser } from 'csv-parse';
import { knownHeaders } from './columns.ts';
import { findHeader, markedEncoding, notText, sniffDelimiter, type Delimiter, type Encoding } from './sniff.ts';
import { countText } from './numbers.ts';

/** Limits of an upload; over-limit files are refused whole. */
export const LIMITS = { bytes: 50 * 1024 * 1024, rows: 250_000, columns: 200, cell: 500 };
export type Limits = typeof LIMITS;

const HEAD_BYTES = 256 * 1024;
const HEAD_LINES = 120;
/** A record longer than every column at the cell limit, with room for quotes: an open quotation mark. */
const LONGEST_RECORD = 300_000;
const SAMPLES = 3;

/** How the file is to be read. */
export interface TableStyle {
  encoding: Encoding;
  delimiter: Delimiter;
  /** Line with the column names, the first line of the file being 1. */
  headerRow: number;
}

/** What reading a file once from end to end tells of it. */
export interface ScannedTable {
  bytes: number;
  digest: string;
  style: TableStyle;
  headers: string[];
  samples: string[][];
  /** Lines without the header line. */
  rows: number;
}

/** A file that can't be taken in; the message says what we saw, why it matters and what to do. */
export class FileRefused extends Error {
  constructor(
    readonly reason: 'too_large' | 'unreadable',
    message: string,
  ) {
    super(message);
    this.name = 'FileRefused';
  }
}

const unreadable = (message: string) => new FileRefused('unreadable', message);
const tooLarge = (message: string) => new FileRefused('too_large', message);

const megabytes = (bytes: number): string => {
  const size = bytes / (1024 * 1024);
  return `${size < 10 ? size.toFixed(1).replace(/\.0$/, '') : Math.floor(size)} MB`;
};

/** FILE-01: refused by size, with both figures. */
export const tooManyBytes = (bytes: number | null, limit: number): FileRefused => {
  const size = bytes === null ? `more than ${megabytes(limit)}` : megabytes(Math.max(bytes, limit + 1024 * 1024));
  return tooLarge(
    `This file is ${size}. The limit is ${megabytes(limit)}. Split it by region or remove columns you don't need, then upload the parts to the same portfolio.`,
  );
};

const parserFor = (delimiter: Delimiter): Parser =>
  parse({
    delimiter,
    record_delimiter: ['\r\n', '\n', '\r'],
    relax_quotes: true,
    relax_column_count: true,
    skip_empty_lines: false,
    max_record_size: LONGEST_RECORD,
  });

/** Turns bytes into text piece by piece. Without a mark, UTF-8 is believed until a byte contradicts it. */
class Decoder {
  private decoder: TextDecoder;
  private replaced = false;

  constructor(
    public encoding: Encoding,
    private readonly marked: boolean,
  ) {
    this.decoder = new TextDecoder(encoding, { fatal: encoding === 'utf-8' && !marked });
  }

  decode(bytes?: Uint8Array): string {
    try {
      return bytes ? this.decoder.decode(bytes, { stream: true }) : this.decoder.decode();
    } catch (error) {
      if (this.marked || this.replaced) throw error;
      this.replaced = true;
      this.encoding = 'windows-1252';
      this.decoder = new TextDecoder('windows-1252');
      return bytes ? this.decoder.decode(bytes, { stream: true }) : '';
    }
  }
}

const isBlank = (record: readonly string[]) => record.every((cell) => cell.trim() === '');

/** Feeds text to a parser with back-pressure and takes its records as they come. */
class RecordReader {
  private readonly parser: Parser;
  private failure: Error | null = null;
  /** Starts before the first line, as the parser is given a line of ours first. */
  private line = -1;

  constructor(
    delimiter: Delimiter,
    columns: number,
    private readonly take: (record: string[], line: number) => void,
  ) {
    this.parser = parserFor(delimiter);
    // The parser builds an error for each record unlike its first, at thirty times the cost of reading it. Title lines
    // above the table are short, so it gets a line of the usual width first.
    this.parser.write(`${delimiter.repeat(columns - 1)}\n`);
    this.parser.on('readable', () => {
      let record: string[] | null;
      while (!this.failure && (record = this.parser.read() as string[] | null) !== null) {
        try {
          if (++this.line > 0) this.take(record, this.line);
        } catch (error) {
          this.failure = error as Error;
          // Ends whoever waits for the parser, as it will give no more records.
          this.parser.destroy();
        }
      }
    });
    this.parser.on('error', (error) => (this.failure ??= asRefusal(error, this.line)));
  }

  async write(text: string): Promise<void> {
    await new Promise<void>((resolve) => {
      if (this.parser.destroyed || this.failure) return resolve();
      this.parser.write(text, () => resolve());
    });
    if (this.failure) throw this.failure;
  }

  async end(): Promise<number> {
    if (!this.failure) {
      await new Promise<void>((resolve) => {
        this.parser
          .once('end', resolve)
          .once('error', () => resolve())
          .once('close', resolve);
        this.parser.end();
      });
    }
    if (this.failure) throw this.failure;
    return this.line;
  }
}

function asRefusal(error: Error, line: number): Error {
  if (!(error instanceof CsvError)) return error;
  return unreadable(
    `A quotation mark opens in line ${countText(line + 1)} and isn't closed, so the rest of the file can't be told apart. Close it or remove it, then upload again.`,
  );
}

/**
 * Reads a file once while it arrives: passes every piece on to be kept, and finds out encoding, delimiter, header,
 * counts and digest, holding no more than its head in memory. Throws FileRefused as soon as it can't be taken in.
 */
export async function scanTable(
  chunks: AsyncIterable<Uint8Array>,
  keep: (chunk: Uint8Array) => Promise<void>,
  limits: Limits = LIMITS,
): Promise<ScannedTable> {
  const hash = createHash('sha256');
  let bytes = 0;
  let head: Uint8Array[] = [];
  let headBytes = 0;
  let scan: HeadScan | null = null;
  for await (const chunk of chunks) {
    bytes += chunk.length;
    if (bytes > limits.bytes) throw tooManyBytes(null, limits.bytes);
    hash.update(chunk);
    if (scan) await scan.write(chunk);
    else {
      head.push(chunk);
      headBytes += chunk.length;
      if (headBytes >= HEAD_BYTES) {
        scan = new HeadScan(Buffer.concat(head), limits);
        await scan.write(Buffer.concat(head));
        head = [];
      }
    }
    await keep(chunk);
  }
  if (bytes === 0)
    throw unreadable(
      'This file is empty. There is nothing to read. Choose the file that holds the sites and upload again.',
    );
  if (!scan) {
    const all = Buffer.concat(head);
    scan = new HeadScan(all, limits);
    await scan.write(all);
  }
  return { bytes, digest: hash.digest('hex'), ...(await scan.end()) };
}

/** The scan once enough of the file is there to know how to read it. */
class HeadScan {
  private readonly decoder: Decoder;
  private readonly delimiter: Delimiter;
  private readonly reader: RecordReader;
  private readonly first: string[][] = [];

  constructor(
    head: Uint8Array,
    private readonly limits: Limits,
  ) {
    const kind = notText(head);
    if (kind) {
      throw unreadable(
        `This file is ${kind}, not text, whatever its name says. ${
          kind.includes('Excel')
            ? 'Save the sheet with the sites as CSV (UTF-8) and upload that.'
            : 'Upload the schedule as CSV: one line a site, column names on top.'
        }`,
      );
    }
    const marked = markedEncoding(head);
    this.decoder = new Decoder(marked ?? 'utf-8', marked !== null);
    if (!marked?.startsWith('utf-16')) refuseNul(head);
    const text = new TextDecoder(marked ?? 'utf-8').decode(head);
    const sniffed = sniffDelimiter(text);
    this.delimiter = sniffed.delimiter;
    this.reader = new RecordReader(this.delimiter, sniffed.columns, (record, line) => this.take(record, line));
  }

  async write(chunk: Uint8Array): Promise<void> {
    const text = this.decoder.decode(chunk);
    if (text.includes('\u0000')) throw nulBytes();
    await this.reader.write(text);
  }

  private take(record: string[], line: number): void {
    const { limits, first } = this;
    if (record.length > limits.columns) {
      throw tooLarge(
        `Line ${countText(line)} has ${countText(record.length)} columns. The limit is ${limits.columns}. Remove columns you don't need and upload again.`,
      );
    }
    for (let i = 0; i < record.length; i++) {
      if (record[i]!.length > limits.cell) {
        throw tooLarge(
          `Line ${countText(line)}, column ${i + 1} holds ${countText(record[i]!.length)} characters. The limit is ${limits.cell} a cell. Shorten it, or look for a quotation mark that isn't closed, and upload again.`,
        );
      }
    }
    if (first.length < HEAD_LINES) first.push(record);
  }

  async end(): Promise<Omit<ScannedTable, 'bytes' | 'digest'>> {
    await this.reader.write(this.decoder.decode());
    const lines = await this.reader.end();
    const { first, limits } = this;
    const at = findHeader(first, knownHeaders);
    if (at === null) {
      throw unreadable(
        "We couldn't find a header row in the first 20 lines. Without column names we can't tell values from places. Put the column names in one line above the sites and upload again.",
      );
    }
    const rows = lines - 1;
    if (rows > limits.rows) {
      throw tooLarge(
        `This file has ${countText(rows)} rows. The limit is ${countText(limits.rows)}. Split it by region, then upload the parts as portfolios of their own.`,
      );
    }
    const data = first.slice(at + 1).filter((record) => !isBlank(record));
    if (data.length === 0)
      throw unreadable(
        'This file holds column names and no rows. There is nothing to score. Choose the file that holds the sites.',
      );
    const headers = first[at]!.map((cell, index) => cell.replace(/^\ufeff/, '').trim() || `Column ${index + 1}`);
    const samples = headers.map((_, index) =>
      data.flatMap((record) => (record[index]?.trim() ? [record[index].trim()] : [])).slice(0, SAMPLES),
    );
    return {
      style: { encoding: this.decoder.encoding, delimiter: this.delimiter, headerRow: at + 1 },
      headers,
      samples,
      rows,
    };
  }
}

const nulBytes = () =>
  unreadable(
    'This file holds NUL bytes, which no text has. It may be UTF-16 without its mark, or damaged. Save it as CSV (UTF-8) and upload again.',
  );

function refuseNul(head: Uint8Array): void {
  if (head.includes(0)) throw nulBytes();
}

/** The records of a stored file with their line numbers, under a known style; the header line comes with the others. */
export async function readTable(
  chunks: AsyncIterable<Uint8Array>,
  style: TableStyle,
  columns: number,
  take: (record: string[], line: number) => void,
): Promise<number> {
  const decoder = new TextDecoder(style.encoding);
  const reader = new RecordReader(style.delimiter, columns, take);
  for await (const chunk of chunks) await reader.write(decoder.decode(chunk, { stream: true }));
  await reader.write(decoder.decode());
  return reader.end();
}
