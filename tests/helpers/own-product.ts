import { spawn, type ChildProcess } from 'node:child_process';
import { chmodSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { destroyCluster, ROOT } from '../../api/bin/postgres.mjs';

export const freePort = (): Promise<number> =>
  new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen(0, () => {
      const { port } = probe.address() as AddressInfo;
      probe.close(() => resolve(port));
    });
  });

/** A data folder of a test's own, reachable by the database server's user. */
export const newDataFolder = (): string => {
  const folder = mkdtempSync(join(tmpdir(), 'gustloom-product-'));
  chmodSync(folder, 0o755);
  return folder;
};

export interface Product {
  url: string;
  port: number;
  folder: string;
  password: string;
  starter: ChildProcess;
  /** Everything it has printed so far. */
  printed(): string;
  /** As Ctrl-C does; gives the exit code. */
  stop(): Promise<number | null>;
}

const READY_MS = 180_000;

export const exitOf = (child: ChildProcess): Promise<number | null> =>
  child.exitCode !== null || child.signalCode !== null
    ? Promise.resolve(child.exitCode)
    : new Promise((resolve) => child.once('exit', (code) => resolve(code)));

/** Runs `npm start`'s own program with data of its own. */
export const runStart = (folder: string, port: number, env: Record<string, string> = {}) => {
  let text = '';
  const starter = spawn(process.execPath, [join(ROOT, 'api/bin/start.mjs')], {
    cwd: ROOT,
    env: {
      ...process.env,
      DEMO_RUN: 'off',
      NODE_ENV: 'development',
      ...env,
      GUSTLOOM_DATA: folder,
      PORT: String(port),
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  for (const stream of [starter.stdout, starter.stderr])
    stream.on('data', (piece: Buffer) => (text += piece.toString()));
  return { starter, printed: () => text };
};

/** The whole product, ready to be visited. */
export const startProduct = async (
  options: { folder?: string; port?: number; env?: Record<string, string> } = {},
): Promise<Product> => {
  const folder = options.folder ?? newDataFolder();
  const port = options.port ?? (await freePort());
  const { starter, printed } = runStart(folder, port, options.env);
  for (const begun = Date.now(); !printed().includes('Ctrl-C stops it'); await sleep(100)) {
    if (starter.exitCode !== null) throw new Error(`The product ended at its start:\n${printed()}`);
    if (Date.now() - begun > READY_MS) {
      starter.kill('SIGKILL');
      throw new Error(`The product didn’t get ready:\n${printed()}`);
    }
  }
  const { demoPassword } = JSON.parse(readFileSync(join(folder, 'secrets.json'), 'utf8')) as { demoPassword: string };
  return {
    ...{ url: `http://localhost:${port}`, port, folder, password: demoPassword, starter, printed },
    stop: () => {
      starter.kill('SIGINT');
      return exitOf(starter);
    },
  };
};

/** Stops a product, if it still runs, and removes its data. */
export const discard = async (product: Pick<Product, 'folder' | 'starter'>): Promise<void> => {
  product.starter.kill('SIGINT');
  await exitOf(product.starter);
  await destroyCluster({ folder: product.folder });
  rmSync(product.folder, { recursive: true, force: true });
};
