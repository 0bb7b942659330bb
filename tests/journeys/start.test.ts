import { execFileSync } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { createServer } from 'node:http';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, describe, expect, it } from 'vitest';
import { clusterStatus } from '../../api/bin/postgres.mjs';
import {
  discard,
  exitOf,
  freePort,
  newDataFolder,
  runStart,
  startProduct,
  type Product,
} from '../helpers/own-product.ts';

let product: Product;
const folder = newDataFolder();

const signIn = (email = 'ines.halvard@saltmarsh.example') =>
  fetch(`${product.url}/api/v1/session`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json' },
    body: JSON.stringify({ email, password: product.password }),
  });
const until = async (holds: () => Promise<boolean>, limitMs = 60_000): Promise<number> => {
  const begun = Date.now();
  while (!(await holds().catch(() => false))) {
    if (Date.now() - begun > limitMs) throw new Error(`It didn’t come true in time:\n${product.printed()}`);
    await sleep(100);
  }
  return Date.now() - begun;
};
/** Processes started by this product, by a part of their command. */
const pidsOf = (part: string): number[] =>
  execFileSync('ps', ['-eo', 'pid,ppid,args'], { encoding: 'utf8' })
    .split('\n')
    .filter((line) => line.includes(part) && line.trim().split(/\s+/)[1] === String(product.starter.pid))
    .map((line) => Number(line.trim().split(/\s+/)[0]));
const kill = (part: string) => {
  const pids = pidsOf(part);
  expect(pids).toHaveLength(1);
  process.kill(pids[0]!, 'SIGKILL');
  return pids[0]!;
};
const postmaster = () => Number(readFileSync(join(folder, 'postgres/cluster/postmaster.pid'), 'utf8').split('\n')[0]);

afterAll(() => discard(product));

describe('npm start', () => {
  it('goes from nothing to a sign-in page and demo people who can sign in', async () => {
    product = await startProduct({ folder });
    const page = await fetch(`${product.url}/sign-in`);
    expect(page.status).toBe(200);
    expect(await page.text()).toContain('<div id="root">');
    for (const name of ['ines.halvard', 'teodor.brask', 'oda.renn', 'pell.quist']) {
      expect(product.printed()).toContain(`${name}@saltmarsh.example`);
      expect((await signIn(`${name}@saltmarsh.example`)).status).toBe(201);
    }
    expect(product.printed()).toContain(product.password);
  });

  it('says so when it is already running', async () => {
    const { starter, printed } = runStart(folder, await freePort());
    expect(await exitOf(starter)).toBe(1);
    expect(printed()).toContain(`Already running at ${product.url}`);
  });

  it('says so when another program has the port', async () => {
    const other = createServer();
    const port = await freePort();
    await new Promise<void>((resolve) => other.listen(port, resolve));
    const elsewhere = newDataFolder();
    const { starter, printed } = runStart(elsewhere, port);
    expect(await exitOf(starter)).toBe(1);
    expect(printed()).toContain(`Port ${port} is taken`);
    expect(printed()).not.toMatch(/ {4}at /);
    other.close();
    rmSync(elsewhere, { recursive: true });
  });

  it('brings a killed API and a killed worker back', async () => {
    await until(async () => pidsOf('api/worker.ts').length === 1);
    const worker = kill('api/worker.ts');
    kill('api/server.ts');
    await until(async () => (await signIn()).status === 201);
    await until(async () => pidsOf('api/worker.ts').some((pid) => pid !== worker));
  });

  it('brings a killed database back; meanwhile the API says to wait', async () => {
    process.kill(postmaster(), 'SIGKILL');
    const meanwhile = await signIn();
    expect([201, 503]).toContain(meanwhile.status);
    await until(async () => (await signIn()).status === 201, 120_000);
  });

  it('stops everything on Ctrl-C', async () => {
    const children = ['api/server.ts', 'api/worker.ts', 'mail/sink/main.ts'].flatMap(pidsOf);
    expect(await product.stop()).toBe(0);
    expect(product.printed()).toContain('Stopped.');
    expect(clusterStatus({ folder })).toBe('stopped');
    for (const pid of children) expect(() => process.kill(pid, 0)).toThrow();
  });

  it('starts again with the same data and password, after a kill that left everything lying about, too', async () => {
    const { password } = product;
    product = await startProduct({ folder });
    expect(product.password).toBe(password);
    expect(product.printed()).not.toContain('seeded');
    process.kill(product.starter.pid!, 'SIGKILL');
    process.kill(postmaster(), 'SIGKILL');
    await exitOf(product.starter);
    product = await startProduct({ folder, port: product.port });
    expect((await signIn()).status).toBe(201);
  });
});
