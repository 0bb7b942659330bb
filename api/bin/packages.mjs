/** The npm packages of the lock file, installed when something of them is missing. */
import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { ROOT, SetupError } from './postgres.mjs';

const packagesIn = (file) => {
  try {
    return JSON.parse(readFileSync(file, 'utf8')).packages;
  } catch {
    return null;
  }
};

/** npm notes what it installed when it is through; an install that was cut short or is of another lock differs. */
const areInstalled = () => {
  const wanted = packagesIn(join(ROOT, 'package-lock.json'));
  const installed = packagesIn(join(ROOT, 'node_modules/.package-lock.json'));
  if (!wanted || !installed) return false;
  return Object.entries(wanted).every(
    ([path, { version, optional }]) =>
      path === '' ||
      (optional && !installed[path]) ||
      (installed[path]?.version === version && existsSync(join(ROOT, path, 'package.json'))),
  );
};

/** @returns {boolean} whether anything had to be installed */
export const ensureNodePackages = () => {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 11))
    throw new SetupError(`Node.js 20.11 or newer is needed; this is ${process.versions.node}.`);
  if (areInstalled()) return false;
  console.log('Installing npm packages …');
  const { status } = spawnSync('npm', ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: ROOT,
    stdio: 'inherit',
  });
  if (status !== 0) throw new SetupError('npm ci failed; see above. Put it right and start again.');
  return true;
};
