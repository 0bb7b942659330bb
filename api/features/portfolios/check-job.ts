import type { SiteField } from '#contract/portfolios.ts';
import type { CopyCell } from '../../db/copy.ts';
import type { Job, Queue } from '../../jobs/queue.ts';
import type { Blobs } from '../../ports/blobs.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Transact } from '../../transact.ts';
import { CHECK_QUEUE, CheckPayload } from './check-payload.ts';
import type { EditionRecord, EditionStore } from './edition-store.ts';
import { FileSummary, prepareCheck } from './intake/check.ts';
import { saysThousands } from './intake/columns.ts';
import { VALUE_FIELDS, type Context, type FileRow } from './intake/file-row.ts';
import { lineReader } from './intake/lines.ts';
import { FileRefused, readTable } from './intake/table-file.ts';
import { intakeCells, type IntakeStore } from './intake-store.ts';
import { sameFileMessage } from './same-file.ts';

export interface CheckParts {
  transact: Transact;
  editions: EditionStore;
  intake: IntakeStore;
  blobs: Blobs;
  clock: Clock;
  offshoreM: Context['offshoreM'];
}

const PROGRESS_ROWS = 5_000;
/** Tries after which a fault of ours is told to the person instead of being tried again. */
const TRIES = 3;

/** Another mapping has been asked for, or the edition is gone: this check's result isn't wanted any more. */
class Superseded extends Error {}

/**
 * The checks of an uploaded file: read, compare, judge, store. Everything is stored in one transaction that makes sure
 * in the end that this check is still wanted, so a killed or repeated job leaves its rows once or not at all.
 */
export class CheckJob {
  constructor(private readonly parts: CheckParts) {}

  async run({ data, restarts, signal }: Pick<Job, 'data' | 'restarts' | 'signal'>): Promise<void> {
    const { orgId, editionId, checkNo } = CheckPayload.parse(data);
    const { transact, editions, clock } = this.parts;
    const record = await transact(orgId, (tx) => editions.find(tx, orgId, editionId));
    if (!record || record.checkNo !== checkNo || record.edition.state !== 'checking') return;
    const fail = (problem: string) =>
      transact(orgId, (tx) => editions.fail(tx, orgId, editionId, checkNo, problem, clock.now()));
    try {
      await this.check(orgId, record, signal);
    } catch (error) {
      if (error instanceof Superseded) return;
      if (error instanceof FileRefused) return fail(error.message);
      if (error instanceof RangeError) {
        return fail(
          'The values add up to more than 90 trillion, beyond what can be counted exactly. Check the value columns and their units, then map again.',
        );
      }
      if (restarts >= TRIES) {
        await fail(
          'The checks stopped because of a fault on our side. Map the columns again; if it stays, tell us the edition’s address.',
        );
      }
      throw error;
    }
  }

  private async check(orgId: string, record: EditionRecord, signal: AbortSignal): Promise<void> {
    const { transact, editions, intake, clock, offshoreM } = this.parts;
    const { edition, answers, style } = record;
    if (!answers) throw new Error(`Edition ${edition.id} is being checked without a mapping`);
    const mapping = edition.columns.flatMap(({ index, field }) => (field ? [{ index, field }] : []));
    const total = Math.max(1, style.rows);
    // Reading is the first half of the way, judging and storing the second.
    const report = async (share: number) => {
      if (signal.aborted) throw new Error('The worker is stopping');
      const done = Math.round(total * share);
      await transact(orgId, (tx) => editions.progress(tx, orgId, edition.id, record.checkNo, done));
    };

    const rows = await this.readRows(orgId, record, mapping, (read) => report(0.5 * Math.min(1, read / total)));
    const prepared = prepareCheck(
      rows,
      mapping.map(({ field }) => field),
      answers,
      clock.now().getUTCFullYear(),
      offshoreM,
    );
    const summary = new FileSummary(prepared, answers, thousandsHeader(record));
    const cells = async function* (): AsyncGenerator<CopyCell[]> {
      for (const [index, row] of rows.entries()) {
        if (index % PROGRESS_ROWS === 0) await report(0.5 + (0.5 * index) / rows.length);
        const { judged, surveyed } = summary.judge(row, index);
        yield intakeCells(orgId, edition.id, row, judged, surveyed);
      }
    };
    await transact(orgId, async (tx) => {
      await intake.replace(tx, orgId, edition.id, cells());
      if (!(await editions.isCurrent(tx, orgId, edition.id, record.checkNo))) throw new Superseded();
      const { tally, survey, messages } = summary.finish();
      const same = await sameFileMessage(tx, editions, orgId, edition.portfolioId, edition.file.digest);
      await editions.conclude(tx, orgId, edition.id, {
        ...{ tally, survey },
        messages: same ? [same, ...messages] : messages,
        at: clock.now(),
      });
    });
  }

  private async readRows(
    orgId: string,
    { fileId, edition, style }: EditionRecord,
    mapping: { index: number; field: SiteField }[],
    onRead: (rows: number) => Promise<void>,
  ): Promise<FileRow[]> {
    const bytes = await this.parts.blobs.open(orgId, fileId);
    if (!bytes) throw new Superseded();
    const toRow = lineReader(mapping, style.headerRow);
    const rows: FileRow[] = [];
    let reported = 0;
    const watched = async function* (): AsyncGenerator<Uint8Array> {
      for await (const chunk of bytes as AsyncIterable<Uint8Array>) {
        yield chunk;
        if (rows.length - reported < PROGRESS_ROWS) continue;
        reported = rows.length;
        await onRead(reported);
      }
    };
    await readTable(watched(), style, edition.columns.length, (record, line) => {
      const row = toRow(record, line);
      if (row) rows.push(row);
    });
    return rows;
  }
}

/** The first header over a value that says thousands. */
const thousandsHeader = ({ edition }: EditionRecord): string | null => {
  const values: readonly SiteField[] = [...VALUE_FIELDS, 'total_value'];
  return (
    edition.columns.find(({ name, field }) => field !== null && values.includes(field) && saysThousands(name))?.name ??
    null
  );
};

/** One check at a time in a process: a large file takes a third of a gigabyte while it lasts. */
export const registerPortfolioJobs = (queue: Queue, job: CheckJob): Promise<void> =>
  queue.work(CHECK_QUEUE, (taken) => job.run(taken));
