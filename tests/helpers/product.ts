import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { startCluster } from '../../api/bin/postgres.mjs';
import { discard, startProduct } from './own-product.ts';

export interface Product {
  url: string;
  /** Of every demo person and of everyone a journey brings in. */
  password: string;
  /** For journeys that bring in people of their own. */
  databaseUrl: string;
}
declare module 'vitest' {
  interface ProvidedContext {
    product: Product;
  }
}

const readJson = <T>(...path: string[]): T => JSON.parse(readFileSync(join(...path), 'utf8')) as T;
const databaseUrl = async (folder: string) => (await startCluster({ folder })).ownerUrl('gustloom');

/** A product that already runs, by its data folder: quicker while a journey is being written. */
const runningProduct = async (folder: string): Promise<Product> => ({
  url: readJson<{ address: string }>(folder, 'start.json').address,
  password: readJson<{ demoPassword: string }>(folder, 'secrets.json').demoPassword,
  databaseUrl: await databaseUrl(folder),
});

let started: Awaited<ReturnType<typeof startProduct>> | undefined;

/**
 * Vitest's global set-up of the journeys: the product as `npm start` makes it, on data of its own, without the demo run.
 * PRODUCT_FOLDER names the data folder of one that already runs instead.
 */
export const setup = async (project: TestProject): Promise<void> => {
  const running = process.env.PRODUCT_FOLDER;
  if (running) return project.provide('product', await runningProduct(running));
  started = await startProduct();
  const { url, password, folder } = started;
  project.provide('product', { url, password, databaseUrl: await databaseUrl(folder) });
};

export const teardown = async (): Promise<void> => {
  if (started) await discard(started);
};
