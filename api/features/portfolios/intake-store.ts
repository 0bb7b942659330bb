import type { Fix, IntakeMessage, IntakeRow, RowState, SitePoints } from '#contract/portfolios.ts';
import { copyInto, type CopyCell } from '../../db/copy.ts';
import { decodeNumberCursor, encodeCursor, MOST_INTEGER, pageFrom } from '../../db/cursor.ts';
import { toMinor } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import { Tallier, type Tally } from './intake/check.ts';
import type { Correction, FileRow, LineKind, Quality, Received } from './intake/file-row.ts';
import type { JudgedRow, Surveyed } from './intake/judge.ts';

/** A stored row with what it takes to judge it again. */
export interface StoredRow {
  row: FileRow;
  surveyed: Surveyed[];
  corrections: Correction[];
}

/** A row that is scored, as judged last. */
export interface ScoredRow {
  row: FileRow;
  corrections: Correction[];
  state: RowState;
  latitude: number | null;
  longitude: number | null;
  quality: Quality;
  assumed: string[];
}

interface Row {
  file_row: number;
  line: LineKind;
  state: RowState;
  site_ref: string | null;
  latitude: number | null;
  longitude: number | null;
  tiv_minor: string;
  received: Received;
  messages: IntakeMessage[];
  corrected: boolean;
  quality: Quality;
  assumed: string[];
  surveyed: Surveyed[];
  corrections: Correction[];
}

const COPIED = [
  'org_id',
  'edition_id',
  'file_row',
  'line',
  'state',
  'site_ref',
  'latitude',
  'longitude',
  'tiv_minor',
  'received',
  'messages',
  'codes',
  'corrected',
  'quality',
  'assumed',
  'surveyed',
] as const;
const UPDATED_AT_ONCE = 2_000;

/** Codes and attribute names are words of ours, so nothing in them needs quoting. */
const arrayText = (words: readonly string[]) => `{${words.join(',')}}`;

export const intakeCells = (
  orgId: string,
  editionId: string,
  { row, line, received }: FileRow,
  judged: JudgedRow,
  surveyed: readonly Surveyed[],
): CopyCell[] => [
  orgId,
  editionId,
  row,
  line,
  judged.state,
  judged.ref,
  judged.latitude,
  judged.longitude,
  judged.tivMinor,
  JSON.stringify(received),
  judged.messages.length === 0 ? '[]' : JSON.stringify(judged.messages),
  arrayText(judged.codes),
  judged.corrected,
  judged.quality,
  arrayText(judged.assumed),
  surveyed.length === 0 ? '[]' : JSON.stringify(surveyed),
];

const toStored = (row: Row): StoredRow => ({
  row: { row: row.file_row, line: row.line, received: row.received },
  surveyed: row.surveyed,
  corrections: row.corrections,
});

const toScored = (row: Omit<Row, 'messages' | 'surveyed'>): ScoredRow => ({
  row: { row: row.file_row, line: row.line, received: row.received },
  corrections: row.corrections,
  state: row.state,
  latitude: row.latitude,
  longitude: row.longitude,
  quality: row.quality,
  assumed: row.assumed,
});

const toIntakeRow = (row: Row): IntakeRow => ({
  row: row.file_row,
  state: row.state,
  siteRef: row.site_ref,
  tivMinor: toMinor(row.tiv_minor),
  received: row.received as Record<string, string>,
  latitude: row.latitude,
  longitude: row.longitude,
  messages: row.messages,
  corrected: row.corrected,
});

/** Which rows a fix may touch: those the message put in their state, of a kind that the fix can help. */
const FIXABLE: Record<Fix, { states: RowState[]; lines: LineKind[] }> = {
  swap_coordinates: { states: ['held'], lines: ['site'] },
  negate_longitude: { states: ['held'], lines: ['site'] },
  exclude: { states: ['held', 'notes'], lines: ['site', 'total'] },
  keep_all: { states: ['held', 'set_aside'], lines: ['site', 'total'] },
};

/** The lines of a draft's file: their state, their messages, and what was done to them. */
export class IntakeStore {
  /**
   * Replaces the rows of an edition, so that a check done twice leaves them once: whoever comes second waits. Not by the
   * edition's own row, in which progress is noted from another transaction meanwhile.
   */
  async replace(tx: Tx, orgId: string, editionId: string, rows: AsyncIterable<CopyCell[]>): Promise<void> {
    await tx.raw('select pg_advisory_xact_lock(hashtextextended(?, 0))', [`intake rows ${editionId}`]);
    await tx('intake_rows').where({ org_id: orgId, edition_id: editionId }).delete();
    await copyInto(tx, 'intake_rows', COPIED, rows);
  }

  async list(
    tx: Tx,
    orgId: string,
    editionId: string,
    { cursor, limit, state, code }: { cursor?: string; limit: number; state?: RowState; code?: string },
  ) {
    const query = tx('intake_rows')
      .where({ org_id: orgId, edition_id: editionId })
      .orderBy('file_row')
      .limit(limit + 1);
    if (state) void query.where({ state });
    if (code) void query.whereRaw('codes @> array[?]::text[]', [code]);
    const after = decodeNumberCursor(cursor, MOST_INTEGER);
    if (after !== null) void query.where('file_row', '>', after);
    const page = pageFrom(await query.select<Row[]>(), limit, (row) => encodeCursor(row.file_row));
    return { items: page.items.map(toIntakeRow), nextCursor: page.nextCursor };
  }

  /** Rows and TIV of each code, by the state it put them in. */
  async groups(
    tx: Tx,
    orgId: string,
    editionId: string,
  ): Promise<{ code: string; state: RowState; rows: number; tivMinor: number }[]> {
    const { rows } = await tx.raw<{ rows: { code: string; state: RowState; rows: string; tiv: string }[] }>(
      `select found.code, intake_rows.state, count(*) as rows, sum(intake_rows.tiv_minor) as tiv
       from intake_rows cross join unnest(intake_rows.codes) as found (code)
       where intake_rows.org_id = ? and intake_rows.edition_id = ?
       group by 1, 2`,
      [orgId, editionId],
    );
    return rows.map(({ code, state, rows: count, tiv }) => ({
      code,
      state,
      rows: Number(count),
      tivMinor: toMinor(tiv),
    }));
  }

  async points(tx: Tx, orgId: string, editionId: string): Promise<SitePoints> {
    const { rows } = await tx.raw<{
      rows: {
        file_row: number;
        site_no: string;
        site_ref: string | null;
        latitude: number;
        longitude: number;
        tiv_minor: string;
        state: RowState;
      }[];
    }>(
      `select numbered.* from (
         select intake_rows.file_row, intake_rows.site_ref, intake_rows.latitude, intake_rows.longitude, intake_rows.tiv_minor,
           intake_rows.state,
           case when intake_rows.state in ('ready', 'notes')
             then count(*) filter (where intake_rows.state in ('ready', 'notes')) over (order by intake_rows.file_row)
             else 0 end as site_no
         from intake_rows where intake_rows.org_id = ? and intake_rows.edition_id = ?
       ) numbered
       where numbered.latitude is not null and numbered.state <> 'set_aside'
       order by numbered.file_row`,
      [orgId, editionId],
    );
    return {
      siteNo: rows.map(({ site_no: siteNo }) => Number(siteNo)),
      row: rows.map(({ file_row: fileRow }) => fileRow),
      ref: rows.map(({ site_ref: ref }) => ref ?? ''),
      latitude: rows.map(({ latitude }) => latitude),
      longitude: rows.map(({ longitude }) => longitude),
      tivMinor: rows.map(({ tiv_minor: tiv }) => toMinor(tiv)),
      state: rows.map(({ state }) => state),
    };
  }

  /** Sums over the stored rows, by the same adding-up as in a check. */
  async tally(tx: Tx, orgId: string, editionId: string): Promise<Tally> {
    const rows = await tx('intake_rows')
      .where({ org_id: orgId, edition_id: editionId })
      .groupBy('state', 'quality', 'assumed')
      .select<{ state: RowState; quality: Quality; assumed: string[]; rows: string; tiv: string }[]>(
        'state',
        'quality',
        'assumed',
        tx.raw('count(*) as rows'),
        tx.raw('sum(tiv_minor) as tiv'),
      );
    const tallier = new Tallier();
    for (const { state, quality, assumed, rows: count, tiv } of rows) {
      tallier.add({ state, quality, assumed, tivMinor: toMinor(tiv) }, Number(count));
    }
    return tallier.tally();
  }

  /** Numbers of the rows that a fix of one message may touch, all or some of those asked for. */
  async fixable(
    tx: Tx,
    orgId: string,
    editionId: string,
    kind: Fix,
    code: string,
    asked?: number[],
  ): Promise<number[]> {
    const { states, lines } = FIXABLE[kind];
    const query = tx('intake_rows')
      .where({ org_id: orgId, edition_id: editionId })
      .whereIn('state', states)
      .whereIn('line', lines)
      .whereRaw('codes @> array[?]::text[]', [code])
      .orderBy('file_row');
    if (asked) void query.whereRaw('file_row = any(?::integer[])', [asked]);
    return (await query.select<{ file_row: number }[]>('file_row')).map(({ file_row: row }) => row);
  }

  async byNumber(tx: Tx, orgId: string, editionId: string, rows: number[]): Promise<StoredRow[]> {
    const found = await tx('intake_rows')
      .where({ org_id: orgId, edition_id: editionId })
      .whereRaw('file_row = any(?::integer[])', [rows])
      .orderBy('file_row')
      .select<Row[]>();
    return found.map(toStored);
  }

  async byReference(tx: Tx, orgId: string, editionId: string, refs: string[]): Promise<StoredRow[]> {
    const found = await tx('intake_rows')
      .where({ org_id: orgId, edition_id: editionId })
      .whereRaw('site_ref = any(?::text[])', [refs])
      .orderBy('file_row')
      .select<Row[]>();
    return found.map(toStored);
  }

  /**
   * The scored rows in file order, a batch at a time, read once through a cursor: asked for batch by batch, a table
   * that was just filled and has no statistics yet is sorted anew each time. Other work may be done between batches.
   */
  async *scored(tx: Tx, orgId: string, editionId: string, size: number): AsyncGenerator<ScoredRow[]> {
    await tx.raw(
      `declare scored_rows no scroll cursor for
       select intake_rows.file_row, intake_rows.line, intake_rows.received, intake_rows.corrections, intake_rows.state,
         intake_rows.latitude, intake_rows.longitude, intake_rows.quality, intake_rows.assumed
       from intake_rows
       where intake_rows.org_id = ? and intake_rows.edition_id = ? and intake_rows.state in ('ready', 'notes')
       order by intake_rows.file_row`,
      [orgId, editionId],
    );
    for (;;) {
      const { rows } = await tx.raw<{ rows: Omit<Row, 'messages' | 'surveyed'>[] }>(`fetch ${size} from scored_rows`);
      if (rows.length > 0) yield rows.map(toScored);
      if (rows.length < size) break;
    }
    await tx.raw('close scored_rows');
  }

  /** Stores rows judged anew with their corrections. */
  async update(
    tx: Tx,
    orgId: string,
    editionId: string,
    rows: readonly { judged: JudgedRow; surveyed: readonly Surveyed[]; corrections: readonly Correction[] }[],
  ): Promise<void> {
    for (let start = 0; start < rows.length; start += UPDATED_AT_ONCE) {
      const batch = rows.slice(start, start + UPDATED_AT_ONCE).map(({ judged, surveyed, corrections }) => ({
        file_row: judged.row,
        state: judged.state,
        site_ref: judged.ref,
        latitude: judged.latitude,
        longitude: judged.longitude,
        tiv_minor: judged.tivMinor,
        messages: judged.messages,
        codes: judged.codes,
        corrected: judged.corrected,
        quality: judged.quality,
        assumed: judged.assumed,
        surveyed,
        corrections,
      }));
      await tx.raw(
        `update intake_rows set state = fresh.state, site_ref = fresh.site_ref, latitude = fresh.latitude,
           longitude = fresh.longitude, tiv_minor = fresh.tiv_minor, messages = fresh.messages, codes = fresh.codes,
           corrected = fresh.corrected, quality = fresh.quality, assumed = fresh.assumed, surveyed = fresh.surveyed,
           corrections = fresh.corrections
         from jsonb_to_recordset(?::jsonb) as fresh (file_row integer, state text, site_ref text, latitude double precision,
           longitude double precision, tiv_minor bigint, messages jsonb, codes text[], corrected boolean, quality text,
           assumed text[], surveyed jsonb, corrections jsonb)
         where intake_rows.org_id = ? and intake_rows.edition_id = ? and intake_rows.file_row = fresh.file_row`,
        [JSON.stringify(batch), orgId, editionId],
      );
    }
  }
}
