import { mkdir, readdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';

const SinkLetter = z.object({
  at: z.iso.datetime(),
  from: z.string(),
  to: z.array(z.string()),
  subject: z.string(),
  text: z.string(),
});
export type SinkLetter = z.infer<typeof SinkLetter>;

const NEWEST = 200;

const decodeWord = (text: string): string =>
  text.replace(/=\?utf-8\?([bq])\?([^?]*)\?=(?:\s+(?==\?))?/gi, (_, kind: string, body: string) =>
    kind.toLowerCase() === 'b' ? Buffer.from(body, 'base64').toString('utf8') : decodeQuoted(body.replaceAll('_', ' ')),
  );
const decodeQuoted = (text: string): string =>
  Buffer.from(
    text.replace(/=\r?\n/g, '').replace(/=([0-9A-F]{2})/gi, (_, hex: string) => String.fromCharCode(parseInt(hex, 16))),
    'latin1',
  ).toString('utf8');

/** Reads the plain one-part letters we send; anything richer is shown as it came. */
export const readLetter = (raw: string, at: Date, from: string, to: string[]): SinkLetter => {
  const cut = raw.search(/\r?\n\r?\n/);
  const head = (cut < 0 ? raw : raw.slice(0, cut)).replace(/\r?\n[ \t]+/g, ' ');
  const body = cut < 0 ? '' : raw.slice(cut).replace(/^\r?\n\r?\n/, '');
  const header = (name: string) => new RegExp(`^${name}:\\s*(.*)$`, 'im').exec(head)?.[1]?.trim() ?? '';
  const encoding = header('content-transfer-encoding').toLowerCase();
  const text =
    encoding === 'base64'
      ? Buffer.from(body, 'base64').toString('utf8')
      : encoding === 'quoted-printable'
        ? decodeQuoted(body)
        : body;
  return { at: at.toISOString(), from, to, subject: decodeWord(header('subject')), text };
};

/** Keeps a letter as one file; the name sorts by time. */
export const keepLetter = async (folder: string, letter: SinkLetter): Promise<void> => {
  await mkdir(folder, { recursive: true });
  const name = `${letter.at.replace(/[:.]/g, '-')}-${Math.random().toString(36).slice(2, 10)}.json`;
  // Renamed into place, so that a reader never meets half a letter.
  await writeFile(join(folder, `.${name}`), JSON.stringify(letter));
  await rename(join(folder, `.${name}`), join(folder, name));
};

/** The newest letters first. */
export const listLetters = async (folder: string): Promise<SinkLetter[]> => {
  const names = await readdir(folder).catch((error: NodeJS.ErrnoException) => {
    if (error.code === 'ENOENT') return [];
    throw error;
  });
  const newest = names
    .filter((name) => /^\d.*\.json$/.test(name))
    .sort()
    .reverse()
    .slice(0, NEWEST);
  return Promise.all(
    newest.map(async (name) => SinkLetter.parse(JSON.parse(await readFile(join(folder, name), 'utf8')))),
  );
};
