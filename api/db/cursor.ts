import { Id, Instant } from '#contract/common.ts';
import { AppError } from '../errors.ts';

type CursorPart = string | number;

/** Where a list's next page starts, as an opaque word. */
export const encodeCursor = (...parts: CursorPart[]): string =>
  Buffer.from(JSON.stringify(parts)).toString('base64url');

const notOurs = () =>
  new AppError('invalid_request', 'This list can’t be continued from there. Load it again from its start.', {
    faults: [{ path: 'query.cursor', message: 'The cursor isn’t one of ours.' }],
  });

/** The parts of a cursor we gave out; anything else is refused, never guessed at. */
const decodeCursor = (cursor: string, length: number): CursorPart[] => {
  try {
    const parts: unknown = JSON.parse(Buffer.from(cursor, 'base64url').toString('utf8'));
    if (
      Array.isArray(parts) &&
      parts.length === length &&
      parts.every((part) => typeof part === 'string' || typeof part === 'number')
    )
      return parts as CursorPart[];
  } catch {
    // Refused below, like any other word that isn't ours.
  }
  throw notOurs();
};

/** Greatest number a column of type integer holds; the database fails on a greater one. */
export const MOST_INTEGER = 2 ** 31 - 1;

/** Cursor of a list ordered by a counted number, at most `most`; null at its start. */
export const decodeNumberCursor = (
  cursor: string | undefined,
  most: number = Number.MAX_SAFE_INTEGER,
): number | null => {
  if (cursor === undefined) return null;
  const [number] = decodeCursor(cursor, 1);
  if (!Number.isSafeInteger(number) || Math.abs(Number(number)) > most) throw notOurs();
  return Number(number);
};

/** Cursor of a list ordered by name, then id; null at its start. */
export const decodeNameCursor = (cursor: string | undefined): { name: string; id: string } | null => {
  if (cursor === undefined) return null;
  const [name, id] = decodeCursor(cursor, 2);
  // The database holds no text with a zero byte.
  if (typeof name !== 'string' || name.includes('\0') || !Id.safeParse(id).success) throw notOurs();
  return { name, id: String(id) };
};

/** Cursor of a list ordered by time, then id; null at its start. */
export const decodeMomentCursor = (cursor: string | undefined): { at: string; id: string } | null => {
  if (cursor === undefined) return null;
  const [at, id] = decodeCursor(cursor, 2);
  // The database knows no year 0, though ISO 8601 does.
  const isInstant = Instant.safeParse(at).success && !String(at).startsWith('0000');
  if (!isInstant || !Id.safeParse(id).success) throw notOurs();
  return { at: String(at), id: String(id) };
};

/** Cuts rows read with `limit + 1` into a page. */
export const pageFrom = <Row>(
  rows: Row[],
  limit: number,
  cursorOf: (row: Row) => string,
): { items: Row[]; nextCursor: string | null } => {
  const items = rows.slice(0, limit);
  const last = items.at(-1);
  return { items, nextCursor: rows.length > limit && last !== undefined ? cursorOf(last) : null };
};
