import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { from as copyFrom } from 'pg-copy-streams';
import type { Tx } from '../transact.ts';
import { connectionOf } from './connection.ts';

export type CopyCell = string | number | boolean | null;

const escapes: Record<string, string> = { '\\': '\\\\', '\t': '\\t', '\n': '\\n', '\r': '\\r' };
const toCell = (value: CopyCell): string =>
  value === null
    ? '\\N'
    : typeof value === 'string'
      ? value.replace(/[\\\t\n\r]/g, (found) => escapes[found]!)
      : String(value);

const ROWS_PER_CHUNK = 500;
const toText = async function* (rows: Iterable<CopyCell[]> | AsyncIterable<CopyCell[]>): AsyncGenerator<string> {
  let lines: string[] = [];
  for await (const row of rows) {
    lines.push(row.map(toCell).join('\t'));
    if (lines.length === ROWS_PER_CHUNK) {
      yield `${lines.join('\n')}\n`;
      lines = [];
    }
  }
  if (lines.length > 0) yield `${lines.join('\n')}\n`;
};

/**
 * Loads many rows at once into a table under row-level security, where COPY itself isn't possible: into a table of the
 * transaction's own, then over. Column and table names come from code, never from a request.
 */
export const copyInto = async (
  tx: Tx,
  table: string,
  columns: readonly string[],
  rows: Iterable<CopyCell[]> | AsyncIterable<CopyCell[]>,
): Promise<void> => {
  const staging = `copy_${table}`;
  const list = columns.map((column) => `"${column}"`).join(', ');
  await tx.raw(`create temporary table ${staging} on commit drop as select ${list} from ${table} with no data`);
  const connection = await connectionOf(tx);
  await pipeline(Readable.from(toText(rows)), connection.query(copyFrom(`copy ${staging} (${list}) from stdin`)));
  await tx.raw(`insert into ${table} (${list}) select ${list} from ${staging}`);
  await tx.raw(`drop table ${staging}`);
};
