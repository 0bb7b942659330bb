import { createHash } from 'node:crypto';
import { PassThrough } from 'node:stream';
import type { Column, Edition, IntakeMessage } from '#contract/portfolios.ts';
import type { Actor } from '../../actor.ts';
import { AppError, notFound } from '../../errors.ts';
import type { Blobs, NewFile } from '../../ports/blobs.ts';
import type { Clock } from '../../ports/clock.ts';
import type { Ids } from '../../ports/ids.ts';
import type { Transact, Tx } from '../../transact.ts';
import type { AuditTrail } from './audit-trail.ts';
import type { EditionStore } from './edition-store.ts';
import { suggestColumns } from './intake/columns.ts';
import { FileRefused, LIMITS, scanTable, tooManyBytes, type Limits, type ScannedTable } from './intake/table-file.ts';
import { bare } from './intake/words.ts';
import type { PortfolioStore } from './portfolio-store.ts';
import { sameFileMessage } from './same-file.ts';

export interface Upload {
  name: string;
  bytes: AsyncIterable<Uint8Array>;
}

export interface UploadParts {
  transact: Transact;
  portfolios: PortfolioStore;
  editions: EditionStore;
  blobs: Blobs;
  audit: AuditTrail;
  clock: Clock;
  ids: Ids;
  limits?: Limits;
}

/** An upload holds a connection to the database while it lasts; more at a time would starve everything else. */
const UPLOADS_AT_ONCE = 4;
/** Boundaries and headers around the file in a form. */
const FORM_BYTES = 64 * 1024;

const refused = (error: FileRefused): AppError =>
  new AppError(error.reason === 'too_large' ? 'file_too_large' : 'file_unreadable', error.message, { cause: error });

const headerDigest = (headers: readonly string[]) =>
  createHash('sha256').update(headers.map(bare).join('\u0000')).digest('hex');

/** Takes location files in: a file is stored whole with a draft edition, or nothing of it is. */
export class UploadService {
  private underway = 0;
  private readonly limits: Limits;

  constructor(private readonly parts: UploadParts) {
    this.limits = parts.limits ?? LIMITS;
  }

  /** Refuses by the announced size before a byte is read. */
  refuseBySize(announcedBytes: number | null): void {
    if (announcedBytes !== null && announcedBytes > this.limits.bytes + FORM_BYTES) {
      throw refused(tooManyBytes(announcedBytes, this.limits.bytes));
    }
  }

  async upload(actor: Actor, portfolioId: string, upload: Upload): Promise<Edition> {
    if (this.underway >= UPLOADS_AT_ONCE) {
      throw new AppError('unavailable', 'Several files are being uploaded just now. Try again in a minute.', {
        retryAfterS: 30,
      });
    }
    this.underway += 1;
    try {
      return await this.parts.transact(actor, (tx) => this.store(tx, actor, portfolioId, upload));
    } catch (error) {
      throw error instanceof FileRefused ? refused(error) : error;
    } finally {
      this.underway -= 1;
    }
  }

  private async store(tx: Tx, actor: Actor, portfolioId: string, upload: Upload): Promise<Edition> {
    const { portfolios, editions, audit, clock, ids } = this.parts;
    const { orgId } = actor;
    if (!(await portfolios.find(tx, orgId, portfolioId))) throw notFound('Portfolio', portfolioId);
    const at = clock.now();
    const file: NewFile = { id: ids.next(), orgId, name: upload.name, uploadedBy: actor.userId, uploadedAt: at };
    const scanned = await this.keep(tx, file, upload.bytes);

    // Only now, as the bytes may have taken minutes to arrive.
    const portfolio = (await portfolios.find(tx, orgId, portfolioId, true))!;
    await editions.removeDraft(tx, orgId, portfolioId);
    const number = await editions.nextNumber(tx, orgId, portfolioId);
    const headers = headerDigest(scanned.headers);
    const same = await sameFileMessage(tx, editions, orgId, portfolioId, scanned.digest);
    const messages: IntakeMessage[] = same ? [same] : [];
    const edition = {
      id: ids.next(),
      portfolioId,
      number,
      currency: portfolio.currency,
      fileId: file.id,
      style: { ...scanned.style, rows: scanned.rows },
      columns: columnsOf(scanned, await editions.lastMapping(tx, orgId, headers)),
      headerDigest: headers,
      messages,
      at,
    };
    await editions.insert(tx, orgId, edition);
    await audit.record(tx, actor, 'portfolio.file_uploaded', `edition:${edition.id}`, {
      portfolioId,
      edition: number,
      bytes: scanned.bytes,
      rows: scanned.rows,
      digest: scanned.digest,
    });
    return (await editions.find(tx, orgId, edition.id))!.edition;
  }

  /** Passes the bytes on to storage while they are being read; memory holds no more than a few pieces. */
  private async keep(tx: Tx, file: NewFile, bytes: AsyncIterable<Uint8Array>): Promise<ScannedTable> {
    const pipe = new PassThrough();
    // Nobody listens to the pipe itself: what goes wrong is told by the reader or by the storage.
    pipe.on('error', () => undefined);
    const saving = this.parts.blobs.save(tx, file, pipe, this.limits.bytes);
    saving.catch(() => pipe.destroy());
    const keep = async (chunk: Uint8Array): Promise<void> => {
      if (pipe.destroyed || pipe.write(chunk)) return;
      await new Promise<void>((resolve) => {
        const go = () => {
          pipe.off('drain', go).off('close', go);
          resolve();
        };
        pipe.on('drain', go).on('close', go);
      });
    };
    try {
      const scanned = await scanTable(bytes, keep, this.limits);
      pipe.end();
      await saving;
      return scanned;
    } catch (error) {
      pipe.destroy();
      // The transaction may only be undone when the storage has let go of it.
      await saving.catch(() => undefined);
      throw error;
    }
  }
}

function columnsOf({ headers, samples }: ScannedTable, remembered: Column[] | null): Column[] {
  const suggestions = suggestColumns(headers);
  return headers.map((name, index) => {
    const before = remembered?.[index]?.field ?? null;
    return {
      index,
      name,
      samples: samples[index] ?? [],
      suggestion: before ? { field: before, confidence: 'sure' as const } : remembered ? null : suggestions[index]!,
      field: before,
    };
  });
}
