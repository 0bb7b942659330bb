import type { Readable } from 'node:stream';
import type { Tx } from '../transact.ts';

export interface NewFile {
  id: string;
  orgId: string;
  name: string;
  uploadedBy: string;
  uploadedAt: Date;
}

export interface StoredFile {
  bytes: number;
  /** SHA-256 of the bytes as they came, in hex. */
  digest: string;
}

/** Original bytes of uploaded files, kept where every worker and the one backup finds them. */
export interface Blobs {
  /** Streams a file in as part of the caller's transaction; refused with `file_too_large` above the limit. */
  save(tx: Tx, file: NewFile, bytes: Readable, limitBytes: number): Promise<StoredFile>;
  /** Streams a file out, a piece at a time; null when the organisation has no such file. */
  open(orgId: string, fileId: string): Promise<Readable | null>;
}
