import { createHash, randomBytes, randomUUID } from 'node:crypto';
import { Readable } from 'node:stream';
import { buffer } from 'node:stream/consumers';
import { describe, expect, it } from 'vitest';
import { PostgresBlobs } from '../../api/adapters/blobs/postgres-blobs.ts';
import { testDatabase } from '../helpers/database.ts';
import { addOrganisations, DUNE, REEF } from '../helpers/people.ts';

const { owner, superUser, transact } = await testDatabase();
await addOrganisations(owner, DUNE, REEF);
const blobs = new PostgresBlobs(transact);
const save = (bytes: Buffer, limit = 10_000_000, pieces = 1000) => {
  const id = randomUUID();
  const source = Readable.from(
    (function* () {
      for (let at = 0; at < bytes.length; at += pieces) yield bytes.subarray(at, at + pieces);
    })(),
  );
  const file = { id, orgId: DUNE.id, name: 'a.csv', uploadedBy: DUNE.people.underwriter.id, uploadedAt: new Date() };
  return transact(DUNE.id, (tx) => blobs.save(tx, file, source, limit)).then((stored) => ({ id, ...stored }));
};

describe('a file', () => {
  it.each([0, 1, 256 * 1024, 256 * 1024 + 1, 1_000_003])('of %i bytes comes back as it went in', async (size) => {
    const bytes = randomBytes(size);
    const stored = await save(bytes, 10_000_000, 60_001);
    expect(stored).toMatchObject({ bytes: size, digest: createHash('sha256').update(bytes).digest('hex') });
    const back = await blobs.open(DUNE.id, stored.id);
    expect((await buffer(back!)).equals(bytes)).toBe(true);
  });
  it('above the limit is refused and leaves nothing', async () => {
    const before = await superUser('files').count().first();
    await expect(save(randomBytes(300_000), 200_000)).rejects.toMatchObject({ code: 'file_too_large' });
    expect(await superUser('files').count().first()).toEqual(before);
  });
  it('of another organisation isn’t there', async () => {
    const { id } = await save(Buffer.from('theirs'));
    expect(await blobs.open(REEF.id, id)).toBeNull();
    expect(await blobs.open(DUNE.id, randomUUID())).toBeNull();
  });
});
