import { fork } from 'node:child_process';
import { mkdtemp, rm } from 'node:fs/promises';
import { connect, createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { fileURLToPath } from 'node:url';
import pino from 'pino';
import request from 'supertest';
import { afterAll, describe, expect, it, onTestFinished } from 'vitest';
import { SmtpMail } from '../../api/adapters/mail/smtp-mail.ts';
import { createApp } from '../../api/app.ts';
import type { Config } from '../../api/config.ts';
import { createContainer } from '../../api/container.ts';
import { registerOutboxJobs } from '../../api/jobs/outbox.ts';
import { createTestApp } from '../helpers/app.ts';
import { DUNE } from '../helpers/people.ts';

const freePort = () =>
  new Promise<number>((resolve) => {
    const probe = createServer().listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo;
      probe.close(() => resolve(port));
    });
  });
const answers = (port: number) =>
  new Promise<boolean>((resolve) => {
    const socket = connect(port, '127.0.0.1');
    socket.once('data', () => resolve(true)).once('error', () => resolve(false));
    socket.once('data', () => socket.destroy());
  });
const until = async (holds: () => Promise<boolean>): Promise<void> => {
  for (let tries = 0; !(await holds()); tries += 1) {
    if (tries > 300) throw new Error('It never came to that');
    await sleep(100);
  }
};

const folder = await mkdtemp(join(tmpdir(), 'mail-sink-'));
const port = await freePort();
const FROM = 'Gustloom <no-reply@gustloom.example>';
const mail = new SmtpMail(`smtp://127.0.0.1:${port}`, FROM);
const { app, container, database, clock } = await createTestApp({ mail, config: { MAIL_SINK_FOLDER: folder } });
const sink = fork(fileURLToPath(new URL('../../api/adapters/mail/sink/main.ts', import.meta.url)), {
  execArgv: ['--import', 'tsx'],
  env: { PATH: process.env.PATH, MAIL_SINK_FOLDER: folder, MAIL_SINK_PORT: String(port) },
});
afterAll(async () => {
  sink.kill();
  await rm(folder, { recursive: true, force: true });
});

const page = async () => (await request(app).get('/dev/mail').expect(200)).text;
const letters = (text: string) => text.split('<article>').slice(1);

describe('a letter on its way to the page of sent mail', () => {
  it('isn’t there before anything was sent', async () => expect(await page()).toContain('No mail has been sent yet.'));

  it('goes from the outbox over SMTP, whole, and shows once', async () => {
    await until(() => answers(port));
    const subject = 'Run 7, “Côte d’Azur & Île de Ré”: finished with a range from 1 200 000 to 3 400 000 in euros';
    const text = `Gross: 12 % of TIV <b>in bold?</b>\n.\n\n${'a line longer than mail allows '.repeat(60)}\nÜber alles: 台風`;
    await registerOutboxJobs(container.queue, { transact: container.transact, mail, clock });
    await container.transact(DUNE.id, (tx) =>
      container.outbox.post(tx, DUNE.id, { to: DUNE.people.underwriter.email, subject, text }),
    );
    await until(async () => letters(await page()).length > 0);
    const shown = letters(await page());
    expect(shown).toHaveLength(1);
    const plain = shown[0]!.replace(/&#(\d+);/g, (_, code: string) => String.fromCharCode(Number(code)));
    expect(plain).toContain(`<h2>${subject}</h2>`);
    expect(plain).toContain(`from no-reply@gustloom.example · to ${DUNE.people.underwriter.email}`);
    expect(plain).toContain(`<pre>${text}</pre>`);
    await until(async () => (await database.superUser('outbox').first()).delivered_at !== null);
    expect(await database.superUser('outbox').first()).toMatchObject({ attempts: 1, last_error: null });
  });

  it('can’t put markup of its own on the page', async () => {
    await mail.send({ id: 'x', to: 'x@dune.example', subject: '<script>alert(1)</script>', text: '</pre><img src=x>' });
    await until(async () => letters(await page()).length === 2);
    expect(await page()).not.toMatch(/<script|<img/);
  });
  it('is shown newest first and kept by nobody’s cache', async () => {
    await sleep(5);
    await mail.send({ id: 'y', to: 'x@dune.example', subject: 'The newest', text: '' });
    await until(async () => letters(await page()).length === 3);
    expect(letters(await page())[0]).toContain('<h2>The newest</h2>');
    await request(app).get('/dev/mail').expect('Cache-Control', 'no-store');
  });
});

describe('a mail server that is away', () => {
  it('is told to whoever sends, so that the letter stays in the outbox', async () => {
    const nowhere = new SmtpMail(`smtp://127.0.0.1:${await freePort()}`, FROM);
    const letter = { id: 'z', to: 'x@dune.example', subject: 'x', text: 'x' };
    await expect(nowhere.send(letter)).rejects.toThrow(/ECONNREFUSED/);
  });
});

describe('the page of sent mail', () => {
  /** The product on the same database, configured otherwise. */
  const productWith = (change: Partial<Config>) => {
    const parts = { clock, mail, log: pino({ level: 'silent' }) };
    const other = createContainer({ ...container.config, ...change }, 'api', parts);
    onTestFinished(() => other.close());
    return createApp(other.appParts);
  };
  const unlike = async (product: ReturnType<typeof productWith>) => {
    const { text } = await request(product).get('/dev/mail');
    expect(text).not.toContain('Mail sent');
    expect(text).not.toContain('The newest');
  };
  it('isn’t there without a sink', () => unlike(productWith({ mail: { ...container.config.mail, sinkFolder: null } })));
  it('isn’t there in production, even if a sink were configured', () =>
    unlike(productWith({ environment: 'production' })));
});
