/** Builds the client when one of its sources has changed since the last build. */
import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { ROOT, SetupError } from './postgres.mjs';

const SOURCES = ['web', 'api/contract', 'fonts', 'vite.config.ts', 'tsconfig.json', 'package-lock.json'];
const DIGEST_FILE = join(ROOT, 'dist/web.sources');

const digestOfSources = () => {
  const digest = createHash('sha256');
  const add = (path) => {
    const full = join(ROOT, path);
    if (!existsSync(full)) return;
    digest.update(`${path}\0`);
    digest.update(readFileSync(full));
  };
  for (const source of SOURCES) {
    const entries = existsSync(join(ROOT, source))
      ? source.includes('.')
        ? [source]
        : readdirSync(join(ROOT, source), { recursive: true, withFileTypes: true })
            .filter((entry) => entry.isFile())
            .map((entry) => join(entry.parentPath ?? entry.path, entry.name).slice(ROOT.length + 1))
      : [];
    entries.sort().forEach(add);
  }
  return digest.digest('hex');
};

export const VITE = join(ROOT, 'node_modules/vite/bin/vite.js');

/** @returns {boolean} whether it built anything */
export const ensureClient = () => {
  if (!existsSync(join(ROOT, 'web/index.html'))) return false;
  const digest = digestOfSources();
  const isBuilt = existsSync(join(ROOT, 'dist/web/index.html')) && existsSync(DIGEST_FILE);
  if (isBuilt && readFileSync(DIGEST_FILE, 'utf8') === digest) return false;
  console.log('Building the client …');
  const built = spawnSync(process.execPath, [VITE, 'build', '--logLevel', 'warn'], { cwd: ROOT, stdio: 'inherit' });
  if (built.status !== 0) throw new SetupError('The client could not be built; see above.');
  mkdirSync(join(ROOT, 'dist'), { recursive: true });
  writeFileSync(DIGEST_FILE, digest);
  return true;
};
