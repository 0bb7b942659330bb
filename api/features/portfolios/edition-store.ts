import type { Column, Edition, EditionState, IntakeMessage, Mapping, Reconciliation } from '#contract/portfolios.ts';
import type { z } from 'zod';
import type { EditionSummary } from '#contract/portfolios.ts';
import { noticesFor } from '#contract/notices.ts';
import { toInstant, toInstantOrNull, toMinor } from '../../db/mapping.ts';
import type { Tx } from '../../transact.ts';
import type { Answers, FileSurvey, Tally } from './intake/check.ts';
import type { TableStyle } from './intake/table-file.ts';

type State = z.infer<typeof EditionState>;
type Control = Pick<z.output<typeof Mapping>, 'expectedRows' | 'expectedTivMinor'>;
export type Summary = z.infer<typeof EditionSummary>;
/** How the file is read, with the lines it has beside the header. */
export type StoredStyle = TableStyle & { rows: number; decimal?: 'point' | 'comma' };

interface EditionRow {
  id: string;
  portfolio_id: string;
  portfolio_name: string;
  number: number;
  state: State;
  currency: string;
  as_at: string | null;
  file_id: string;
  file_name: string;
  file_bytes: string;
  file_digest: string;
  uploaded_at: Date;
  uploaded_by: string | null;
  style: StoredStyle;
  columns: Column[];
  control: Partial<Control>;
  answers: Answers | null;
  survey: FileSurvey | null;
  check_no: number;
  progress_done: number | null;
  progress_total: number | null;
  problem: string | null;
  reconciliation: Reconciliation | null;
  quality: Edition['quality'];
  assumptions: Edition['assumptions'];
  assumed_tiv_minor: string;
  messages: IntakeMessage[];
  held_reason: string | null;
  control_reason: string | null;
  sealed_at: Date | null;
  sealed_by_name: string | null;
  digest: string | null;
}

interface FixRow {
  id: string;
  seq: number;
  kind: Edition['fixes'][number]['kind'];
  code: string;
  rows: number;
  reason: string;
  by: string | null;
  applied_at: Date;
}

/** An edition as the service works with it: what people see, and what only the checks need. */
export interface EditionRecord {
  edition: Edition;
  fileId: string;
  style: StoredStyle;
  answers: Answers | null;
  survey: FileSurvey | null;
  checkNo: number;
}

const COLUMNS = `editions.*, to_char(editions.as_at, 'YYYY-MM-DD') as as_at, portfolios.name as portfolio_name,
  files.name as file_name, files.bytes as file_bytes, files.digest as file_digest, files.uploaded_at,
  uploader.name as uploaded_by, sealer.name as sealed_by_name`;

const toRecord = (row: EditionRow, fixes: FixRow[]): EditionRecord => ({
  fileId: row.file_id,
  style: row.style,
  answers: row.answers,
  survey: row.survey,
  checkNo: row.check_no,
  edition: {
    id: row.id,
    portfolioId: row.portfolio_id,
    portfolioName: row.portfolio_name,
    number: row.number,
    state: row.state,
    currency: row.currency,
    asAt: row.as_at,
    file: {
      name: row.file_name,
      bytes: Number(row.file_bytes),
      digest: row.file_digest,
      uploadedAt: toInstant(row.uploaded_at),
      uploadedBy: row.uploaded_by ?? 'a former member',
    },
    style: {
      delimiter: row.style.delimiter,
      encoding: row.style.encoding,
      headerRow: row.style.headerRow,
      decimal: row.survey?.facts.decimal,
    },
    columns: row.columns,
    progress: row.state === 'checking' ? { done: row.progress_done ?? 0, total: row.progress_total } : null,
    problem: row.problem,
    reconciliation: row.reconciliation,
    control: {
      expectedRows: row.control.expectedRows ?? null,
      expectedTivMinor: row.control.expectedTivMinor ?? null,
    },
    quality: row.quality,
    assumptions: row.assumptions,
    assumedTivMinor: toMinor(row.assumed_tiv_minor),
    messages: row.messages,
    fixes: fixes.map(({ id, kind, code, rows, reason, by, applied_at: at }) => ({
      id,
      kind,
      code,
      rows,
      reason,
      by: by ?? 'a former member',
      at: toInstant(at),
    })),
    heldReason: row.held_reason,
    controlReason: row.control_reason,
    sealedAt: toInstantOrNull(row.sealed_at),
    sealedBy: row.sealed_by_name,
    digest: row.digest,
    notices: noticesFor('scope'),
  },
});

export interface NewEdition {
  id: string;
  portfolioId: string;
  number: number;
  currency: string;
  fileId: string;
  style: StoredStyle;
  columns: Column[];
  headerDigest: string;
  messages: IntakeMessage[];
  at: Date;
}

/** Heads of editions; their rows are in intake_rows and sites. */
export class EditionStore {
  async find(tx: Tx, orgId: string, editionId: string, lock = false): Promise<EditionRecord | null> {
    if (lock) await tx('editions').where({ org_id: orgId, id: editionId }).forUpdate().first('editions.id');
    const row = await tx('editions')
      .join('portfolios', 'portfolios.id', 'editions.portfolio_id')
      .join('files', 'files.id', 'editions.file_id')
      .leftJoin('users as uploader', 'uploader.id', 'files.uploaded_by')
      .leftJoin('users as sealer', 'sealer.id', 'editions.sealed_by')
      .where({ 'editions.org_id': orgId, 'editions.id': editionId })
      .first<EditionRow | undefined>(tx.raw(COLUMNS));
    if (!row) return null;
    const fixes = await tx('fixes')
      .leftJoin('users', 'users.id', 'fixes.applied_by')
      .where({ 'fixes.org_id': orgId, 'fixes.edition_id': editionId })
      .orderBy('fixes.seq')
      .select<FixRow[]>(
        'fixes.id',
        'fixes.seq',
        'fixes.kind',
        'fixes.code',
        'fixes.reason',
        'fixes.applied_at',
        'users.name as by',
        tx.raw('cardinality(fixes.file_rows) as rows'),
      );
    return toRecord(row, fixes);
  }

  async insert(tx: Tx, orgId: string, edition: NewEdition): Promise<void> {
    await tx('editions').insert({
      id: edition.id,
      org_id: orgId,
      portfolio_id: edition.portfolioId,
      number: edition.number,
      state: 'mapping',
      currency: edition.currency,
      file_id: edition.fileId,
      style: JSON.stringify(edition.style),
      columns: JSON.stringify(edition.columns),
      header_digest: edition.headerDigest,
      messages: JSON.stringify(edition.messages),
      created_at: edition.at,
      updated_at: edition.at,
    });
  }

  /** Removes the portfolio's draft with its rows, and its file when nothing else rests on it. */
  async removeDraft(tx: Tx, orgId: string, portfolioId: string): Promise<void> {
    const [draft] = await tx('editions')
      .where({ org_id: orgId, portfolio_id: portfolioId })
      .whereNot({ state: 'sealed' })
      .delete()
      .returning<{ file_id: string }[]>('file_id');
    if (!draft) return;
    await tx('files').where({ org_id: orgId, id: draft.file_id }).delete();
  }

  async nextNumber(tx: Tx, orgId: string, portfolioId: string): Promise<number> {
    const row = await tx('editions')
      .where({ org_id: orgId, portfolio_id: portfolioId })
      .max<{ last: number | null }>('editions.number as last')
      .first();
    return (row?.last ?? 0) + 1;
  }

  /** The sealed edition of a portfolio made from the same bytes, the latest if there are several. */
  async sealedFrom(
    tx: Tx,
    orgId: string,
    portfolioId: string,
    fileDigest: string,
  ): Promise<{ number: number; uploadedAt: Date } | null> {
    const row = await tx('editions')
      .join('files', 'files.id', 'editions.file_id')
      .where({ 'editions.org_id': orgId, 'editions.portfolio_id': portfolioId, 'editions.state': 'sealed' })
      .where('files.digest', fileDigest)
      .orderBy('editions.number', 'desc')
      .first<{ number: number; uploaded_at: Date } | undefined>('editions.number', 'files.uploaded_at');
    return row ? { number: row.number, uploadedAt: row.uploaded_at } : null;
  }

  /** Columns as last mapped for a file with the same header line; null when there was none. */
  async lastMapping(tx: Tx, orgId: string, headerDigest: string): Promise<Column[] | null> {
    const row = await tx('editions')
      .where({ org_id: orgId, header_digest: headerDigest })
      .whereNotNull('editions.answers')
      .orderBy('editions.updated_at', 'desc')
      .first<{ columns: Column[] } | undefined>('editions.columns');
    return row?.columns ?? null;
  }

  /** Takes a mapping and begins a new check, whose number tells it from any check still under way. */
  async startCheck(
    tx: Tx,
    orgId: string,
    editionId: string,
    {
      columns,
      answers,
      control,
      rows,
      at,
    }: { columns: Column[]; answers: Answers; control: Control; rows: number; at: Date },
  ): Promise<number> {
    await tx('fixes').where({ org_id: orgId, edition_id: editionId }).delete();
    const [row] = await tx('editions')
      .where({ org_id: orgId, id: editionId })
      .update({
        state: 'checking',
        columns: JSON.stringify(columns),
        answers: JSON.stringify(answers),
        control: JSON.stringify(control),
        currency: answers.currency,
        check_no: tx.raw('check_no + 1'),
        progress_done: 0,
        progress_total: rows,
        problem: null,
        survey: null,
        reconciliation: null,
        quality: '[]',
        assumptions: '[]',
        assumed_tiv_minor: 0,
        assumed_sites: 0,
        messages: '[]',
        updated_at: at,
      })
      .returning<{ check_no: number }[]>('check_no');
    return row!.check_no;
  }

  async progress(tx: Tx, orgId: string, editionId: string, checkNo: number, done: number): Promise<void> {
    await tx('editions')
      .where({ org_id: orgId, id: editionId, check_no: checkNo, state: 'checking' })
      .update({ progress_done: done });
  }

  /** Whether a check is still the one asked for; locks the edition so that it stays so. */
  async isCurrent(tx: Tx, orgId: string, editionId: string, checkNo: number): Promise<boolean> {
    const row = await tx('editions')
      .where({ org_id: orgId, id: editionId, check_no: checkNo, state: 'checking' })
      .forUpdate()
      .first('editions.id');
    return row !== undefined;
  }

  /** Stores what a check or a fix arrived at. */
  async conclude(
    tx: Tx,
    orgId: string,
    editionId: string,
    { tally, survey, messages, at }: { tally: Tally; survey: FileSurvey; messages: IntakeMessage[]; at: Date },
  ): Promise<void> {
    await tx('editions')
      .where({ org_id: orgId, id: editionId })
      .update({
        state: 'checked',
        survey: JSON.stringify(survey),
        reconciliation: JSON.stringify(tally.reconciliation),
        quality: JSON.stringify(tally.quality),
        assumptions: JSON.stringify(tally.assumptions),
        assumed_tiv_minor: tally.assumedTivMinor,
        assumed_sites: tally.assumedSites,
        messages: JSON.stringify(messages),
        progress_done: null,
        updated_at: at,
      });
  }

  /** A check that can't be carried out puts the draft back to its mapping, with the reason. */
  async fail(tx: Tx, orgId: string, editionId: string, checkNo: number, problem: string, at: Date): Promise<void> {
    await tx('editions')
      .where({ org_id: orgId, id: editionId, check_no: checkNo, state: 'checking' })
      .update({ state: 'mapping', problem, progress_done: null, updated_at: at });
  }

  async seal(
    tx: Tx,
    orgId: string,
    editionId: string,
    seal: {
      asAt: string;
      heldReason: string | null;
      controlReason: string | null;
      digest: string;
      by: string;
      at: Date;
    },
  ): Promise<void> {
    await tx('editions').where({ org_id: orgId, id: editionId }).update({
      state: 'sealed',
      as_at: seal.asAt,
      held_reason: seal.heldReason,
      control_reason: seal.controlReason,
      digest: seal.digest,
      sealed_by: seal.by,
      sealed_at: seal.at,
      updated_at: seal.at,
    });
  }

  async addFix(
    tx: Tx,
    orgId: string,
    editionId: string,
    fix: { id: string; seq: number; kind: string; code: string; rows: number[]; reason: string; by: string; at: Date },
  ): Promise<void> {
    await tx('fixes').insert({
      id: fix.id,
      org_id: orgId,
      edition_id: editionId,
      seq: fix.seq,
      kind: fix.kind,
      code: fix.code,
      file_rows: fix.rows,
      reason: fix.reason,
      applied_by: fix.by,
      applied_at: fix.at,
    });
  }

  async lastFix(
    tx: Tx,
    orgId: string,
    editionId: string,
  ): Promise<{ id: string; seq: number; kind: string; code: string; rows: number[] } | null> {
    const row = await tx('fixes')
      .where({ org_id: orgId, edition_id: editionId })
      .orderBy('seq', 'desc')
      .first<{ id: string; seq: number; kind: string; code: string; file_rows: number[] } | undefined>();
    return row ? { id: row.id, seq: row.seq, kind: row.kind, code: row.code, rows: row.file_rows } : null;
  }

  async removeFix(tx: Tx, orgId: string, fixId: string): Promise<void> {
    await tx('fixes').where({ org_id: orgId, id: fixId }).delete();
  }
}
