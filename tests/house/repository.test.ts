import { execFileSync } from 'node:child_process';
import { existsSync, lstatSync, readdirSync, readFileSync } from 'node:fs';
import { basename, join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { ROOT } from '../../api/bin/postgres.mjs';

const OURS = [
  ...['README.md', 'DEVELOPERS.md', 'package.json', 'vite.config.ts', 'tsconfig.json', 'knexfile.ts'],
  ...['web', 'api', 'migrations', 'seeds', 'tests', 'fonts'],
];
const MADE = ['package-lock.json', 'node_modules', 'dist', 'coverage'];

const isClone = existsSync(join(ROOT, '.git'));
/** Files under version control or about to be; an unpacked archive has no such list, so its folders are read. */
const files = isClone
  ? execFileSync('git', ['ls-files', '-z', '--cached', '--others', '--exclude-standard'], {
      cwd: ROOT,
      encoding: 'utf8',
    })
      .split('\0')
      .filter((name) => name !== '' && existsSync(join(ROOT, name)))
  : OURS.flatMap((top) =>
      lstatSync(join(ROOT, top)).isDirectory()
        ? readdirSync(join(ROOT, top), { recursive: true, encoding: 'utf8' })
            .map((name) => `${top}/${name}`)
            .filter((name) => lstatSync(join(ROOT, name)).isFile())
        : [top],
    );
const source = files.filter((name) => /^(api|web|migrations|seeds|tests)\/.*\.(ts|tsx|mjs|js)$/.test(name));
const product = source.filter((name) => !name.startsWith('tests/'));
const read = (name: string) => readFileSync(join(ROOT, name), 'utf8');
const saying = (names: string[], what: RegExp) => names.filter((name) => what.test(read(name)));

describe('the repository', () => {
  it('has at its top what belongs there, and nothing else', () => {
    const stray = readdirSync(ROOT).filter(
      (name) => !name.startsWith('.') && !OURS.includes(name) && !MADE.includes(name),
    );
    expect(stray).toEqual([]);
  });
  it('has everything that belongs at its top', () => {
    expect(OURS.filter((name) => !existsSync(join(ROOT, name)))).toEqual([]);
  });
  it('names its source files in kebab-case', () => {
    const named = source.filter((name) => !name.startsWith('migrations/') && !name.startsWith('seeds/'));
    const odd = named.filter((name) => !/^[a-z0-9]+(-[a-z0-9]+)*(\.[a-z0-9-]+)*$/.test(basename(name)));
    expect(odd).toEqual([]);
  });
  it('leaves no skipped or lone test behind', () => {
    const tests = source.filter((name) => /\.test\.tsx?$/.test(name));
    expect(saying(tests, /\b(it|test|describe)\.(skip|only|todo)\b/)).toEqual([]);
  });
  it('leaves nothing “to do” in the product', () => {
    expect(saying(product, /\b(TODO|FIXME|XXX)\b/)).toEqual([]);
  });
  it('reads the environment in one place of the API', () => {
    const typescript = product.filter((name) => name.startsWith('api/') && name.endsWith('.ts'));
    const allowed = /^api\/(config|server|worker)\.ts$|^api\/bin\/|\/main\.ts$/;
    expect(saying(typescript, /process\.env\b/).filter((name) => !allowed.test(name))).toEqual([]);
  });
  it('reads nothing outside itself', () => {
    const own = /^tests\/house\/repository\.test\.ts$/;
    expect(saying(source, /['"`]\/(work|shared|home|root)\//).filter((name) => !own.test(name))).toEqual([]);
  });
  it('keeps addresses of package hosts out of its lock file', () => {
    expect(read('package-lock.json')).not.toContain('"resolved"');
  });
  it('pins every package to one version', () => {
    const { dependencies, devDependencies } = JSON.parse(read('package.json')) as Record<
      string,
      Record<string, string>
    >;
    const loose = Object.entries({ ...dependencies, ...devDependencies }).filter(
      ([, version]) => !/^\d+\.\d+\.\d+$/.test(version),
    );
    expect(loose).toEqual([]);
  });
});
