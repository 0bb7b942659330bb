import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';

const ENGINE = fileURLToPath(new URL('../engine', import.meta.url));
const LENGTH = 12;

let digest: string | null = null;

/** Name of the numbers this build produces: a digest of the engine's sources and of the land polygons. */
export function engineVersion(): string {
  digest ??= digestOfSources();
  return digest;
}

function digestOfSources(): string {
  const hash = createHash('sha256');
  const files = readdirSync(ENGINE, { recursive: true, encoding: 'utf8' })
    .map((file) => file.replaceAll('\\', '/'))
    .filter((file) => file.endsWith('.ts'))
    .sort();
  for (const file of files) hash.update(`${file}\n`).update(readFileSync(`${ENGINE}/${file}`));
  hash.update(readFileSync(fileURLToPath(new URL('./land.ts', import.meta.url))));
  hash.update(readFileSync(createRequire(import.meta.url).resolve('world-atlas/land-10m.json')));
  return hash.digest('hex').slice(0, LENGTH);
}
