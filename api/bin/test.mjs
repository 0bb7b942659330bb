/**
 * `npm test`: everything that is checked, on databases of its own, with one closing line `N passed, N failed`.
 * `npm test -- lint engine` runs only the parts named.
 */
import { spawn } from 'node:child_process';
import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureNodePackages } from './packages.mjs';
import { destroyCluster, ensureDebianPackages, ROOT, SetupError, startCluster } from './postgres.mjs';

const at = (path) => join(ROOT, path);
const node = (script, ...args) => [process.execPath, [at(script), ...args]];
const CHROMIUM = '/usr/bin/chromium';

const folder = mkdtempSync(join(tmpdir(), 'gustloom-tests-'));
// The database server's own user has to get through.
chmodSync(folder, 0o755);
const countsFile = join(folder, 'counts');
const env = {
  ...process.env,
  TEST_CLUSTER: join(folder, 'cluster'),
  TEST_COUNTS: countsFile,
  // Whatever a test starts keeps clear of the product's own data.
  GUSTLOOM_DATA: join(folder, 'data'),
  FORCE_COLOR: process.stdout.isTTY ? '1' : '0',
};

let current = null;
const run = ([command, args]) =>
  new Promise((resolve) => {
    current = spawn(command, args, { cwd: ROOT, env, stdio: ['ignore', 'inherit', 'inherit'], detached: true });
    current.once('error', (error) => {
      console.error(error.message);
      resolve(false);
    });
    current.once('exit', (code) => {
      current = null;
      resolve(code === 0);
    });
  });

/** One thing that holds or doesn't. */
const check =
  (...commands) =>
  async () => {
    for (const command of commands) if (!(await run(command))) return { passed: 0, failed: 1, skipped: 0 };
    return { passed: 1, failed: 0, skipped: 0 };
  };

const readCounts = () => {
  if (!existsSync(countsFile)) return null;
  const [passed, failed, skipped] = readFileSync(countsFile, 'utf8').trim().split(/\s+/).map(Number);
  rmSync(countsFile);
  return { passed, failed, skipped };
};

/** Vitest counts for itself; a run that ends badly without a failed test has failed once all the same. */
const vitest = (project) => async () => {
  const isFine = await run(node('node_modules/vitest/vitest.mjs', 'run', '--project', project));
  const counts = readCounts() ?? { passed: 0, failed: 0, skipped: 0 };
  if (!isFine && counts.failed === 0) counts.failed = 1;
  return counts;
};

const chromium = async () => {
  try {
    ensureDebianPackages(['chromium'], () => existsSync(CHROMIUM));
    return { passed: 1, failed: 0, skipped: 0 };
  } catch (error) {
    console.error(error.message);
    return { passed: 0, failed: 1, skipped: 0 };
  }
};

const TSC = 'node_modules/typescript/bin/tsc';
const PARTS = {
  format: check(node('node_modules/prettier/bin/prettier.cjs', '--check', '--log-level', 'warn', '.')),
  types: check(node(TSC, '--noEmit'), node(TSC, '--noEmit', '-p', 'api/engine/tsconfig.json')),
  lint: check(
    node(
      'node_modules/eslint/bin/eslint.js',
      ...['-c', 'tests/lint/eslint.config.js', '--max-warnings', '0'],
      ...['api', 'web', 'migrations', 'seeds', 'tests'],
    ),
  ),
  engine: vitest('engine'),
  api: vitest('api'),
  web: vitest('web'),
  chromium,
  journeys: vitest('journeys'),
};

const cleanUp = async () => {
  if (current) {
    try {
      process.kill(-current.pid, 'SIGKILL');
    } catch {
      // It ended by itself meanwhile.
    }
  }
  for (const cluster of ['cluster', 'data']) await destroyCluster({ folder: join(folder, cluster) });
  rmSync(folder, { recursive: true, force: true });
};

const main = async () => {
  const wanted = process.argv.slice(2);
  const unknown = wanted.filter((name) => !PARTS[name]);
  if (unknown.length > 0)
    throw new SetupError(`No such part: ${unknown.join(', ')}. Parts: ${Object.keys(PARTS).join(', ')}.`);
  const names = Object.keys(PARTS).filter((name) => wanted.length === 0 || wanted.includes(name));

  ensureNodePackages();
  if (names.includes('api') || names.includes('journeys'))
    await startCluster({ folder: env.TEST_CLUSTER, durable: false });
  const total = { passed: 0, failed: 0, skipped: 0 };
  const lines = [];
  for (const name of names) {
    console.log(`\n── ${name}`);
    const begun = performance.now();
    const counts = await PARTS[name]();
    if (process.env.CI) counts.failed += counts.skipped;
    for (const key of Object.keys(total)) total[key] += counts[key];
    const seconds = ((performance.now() - begun) / 1000).toFixed(1);
    const skipped = counts.skipped > 0 ? `, ${counts.skipped} skipped` : '';
    const line = `${name.padEnd(10)} ${counts.passed} passed, ${counts.failed} failed${skipped} (${seconds} s)`;
    lines.push(line);
    console.log(line);
  }
  console.log(`\n${lines.join('\n')}`);
  return total;
};

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
  process.once(signal, () => void cleanUp().finally(() => process.exit(130)));
}

main()
  .catch((error) => {
    console.error(error instanceof SetupError ? error.message : error);
    return { passed: 0, failed: 1, skipped: 0 };
  })
  .then(async ({ passed, failed }) => {
    await cleanUp();
    console.log(`\n${passed} passed, ${failed} failed`);
    process.exitCode = failed === 0 ? 0 : 1;
  });
