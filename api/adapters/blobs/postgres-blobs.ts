import { createHash } from 'node:crypto';
import { Readable } from 'node:stream';
import { AppError } from '../../errors.ts';
import type { Blobs, NewFile, StoredFile } from '../../ports/blobs.ts';
import type { Transact, Tx } from '../../transact.ts';

const CHUNK_BYTES = 256 * 1024;
const MEGABYTE = 1024 * 1024;

const inChunks = async function* (bytes: Readable): AsyncGenerator<Buffer> {
  let held: Buffer[] = [];
  let size = 0;
  for await (const piece of bytes as AsyncIterable<Buffer>) {
    held.push(piece);
    size += piece.length;
    while (size >= CHUNK_BYTES) {
      const whole = Buffer.concat(held);
      yield whole.subarray(0, CHUNK_BYTES);
      held = [whole.subarray(CHUNK_BYTES)];
      size -= CHUNK_BYTES;
    }
  }
  if (size > 0) yield Buffer.concat(held);
};

/** Files as rows of bytes beside everything else. */
export class PostgresBlobs implements Blobs {
  constructor(private readonly transact: Transact) {}

  async save(tx: Tx, file: NewFile, bytes: Readable, limitBytes: number): Promise<StoredFile> {
    await tx('files').insert({
      id: file.id,
      org_id: file.orgId,
      name: file.name,
      bytes: 0,
      digest: '',
      uploaded_by: file.uploadedBy,
      uploaded_at: file.uploadedAt,
    });
    const hash = createHash('sha256');
    let total = 0;
    let seq = 0;
    for await (const chunk of inChunks(bytes)) {
      total += chunk.length;
      if (total > limitBytes) {
        throw new AppError(
          'file_too_large',
          `The file is larger than ${Math.floor(limitBytes / MEGABYTE)} MB. Split it and upload the parts.`,
        );
      }
      hash.update(chunk);
      await tx('file_chunks').insert({ org_id: file.orgId, file_id: file.id, seq, bytes: chunk });
      seq += 1;
    }
    const stored = { bytes: total, digest: hash.digest('hex') };
    await tx('files').where({ org_id: file.orgId, id: file.id }).update(stored);
    return stored;
  }

  async open(orgId: string, fileId: string): Promise<Readable | null> {
    const known = await this.transact(orgId, (tx) =>
      tx('files').where({ org_id: orgId, id: fileId }).first('files.id'),
    );
    return known ? Readable.from(this.chunks(orgId, fileId), { objectMode: false }) : null;
  }

  // Each piece is read in a transaction of its own, so that a slow reader holds no connection.
  private async *chunks(orgId: string, fileId: string): AsyncGenerator<Buffer> {
    for (let seq = 0; ; seq += 1) {
      const row = await this.transact(orgId, (tx) =>
        tx('file_chunks')
          .where({ org_id: orgId, file_id: fileId, seq })
          .first<{ bytes: Buffer } | undefined>('file_chunks.bytes'),
      );
      if (!row) return;
      yield row.bytes;
    }
  }
}
