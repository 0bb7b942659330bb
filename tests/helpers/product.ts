import { spawn } from 'node:child_process';
import { chmodSync, mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { destroyCluster, ROOT } from '../../api/bin/postgres.mjs';

const READY_MS = 180_000;

export interface Product {
  url: string;
  password: string;
}
declare module 'vitest' {
  interface ProvidedContext {
    product: Product;
  }
}

const freePort = () =>
  new Promise<number>((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() =>
        address && typeof address === 'object' ? resolve(address.port) : reject(new Error('no port')),
      );
    });
  });

/** Vitest's global set-up of the journeys: the product as `npm start` makes it, on data of its own, without the demo run. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(join(tmpdir(), 'gustloom-journeys-'));
  chmodSync(folder, 0o755);
  const port = await freePort();
  const product = { url: `http://localhost:${port}`, password: 'high-water-in-march' };
  const child = spawn(process.execPath, [join(ROOT, 'api/bin/start.mjs')], {
    cwd: ROOT,
    env: {
      ...process.env,
      NODE_ENV: 'development',
      GUSTLOOM_DATA: folder,
      PORT: String(port),
      DEMO_PASSWORD: product.password,
      DEMO_RUN: 'off',
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let said = '';
  for (const stream of [child.stdout, child.stderr]) stream.on('data', (chunk: Buffer) => (said += chunk.toString()));
  await new Promise<void>((resolve, reject) => {
    const fail = (why: string) => reject(new Error(`The product ${why}:\n${said}`));
    const timer = setTimeout(() => fail('did not get ready'), READY_MS);
    child.once('exit', (code) => fail(`stopped with ${code}`));
    child.stdout.on('data', () => {
      if (!said.includes('Gustloom is running at')) return;
      clearTimeout(timer);
      resolve();
    });
  });
  project.provide('product', product);
  return async () => {
    const gone = new Promise((resolve) => child.once('exit', resolve));
    child.kill('SIGTERM');
    await gone;
    await destroyCluster({ folder });
    rmSync(folder, { recursive: true, force: true });
  };
}
