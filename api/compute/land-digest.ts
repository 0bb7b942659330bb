import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';

/** Everything the overland distances of a place depend on, beside the place. */
const SOURCES = [
  './land.ts',
  '../engine/geo/land.ts',
  '../engine/geo/ring-unwrapping.ts',
  '../engine/geo/geodesy.ts',
  '../engine/constants.ts',
  '../engine/units.ts',
];

let digest: string | null = null;

/** Name of the land polygons and of the way distances are measured in them: equal names, equal distances. */
export function landDigest(): string {
  digest ??= digestOfLand();
  return digest;
}

function digestOfLand(): string {
  const hash = createHash('sha256');
  for (const file of SOURCES) hash.update(`${file}\n`).update(readFileSync(new URL(file, import.meta.url)));
  const polygons = createRequire(fileURLToPath(import.meta.url)).resolve('world-atlas/land-10m.json');
  return hash.update(readFileSync(polygons)).digest('hex');
}
