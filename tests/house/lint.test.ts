import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { ESLint } from 'eslint';
import { describe, expect, it } from 'vitest';
import { ROOT } from '../../api/bin/postgres.mjs';

const eslint = new ESLint({ cwd: ROOT, overrideConfigFile: join(ROOT, 'tests/lint/eslint.config.js') });
const rulesBroken = async (file: string, code: string): Promise<string[]> => {
  const [result] = await eslint.lintText(code, { filePath: join(ROOT, file) });
  return (result?.messages ?? []).map(({ ruleId }) => ruleId ?? 'unreadable');
};
const importOf = (what: string, isType = false) =>
  isType
    ? `import type { x } from '${what}';\nexport type Y = typeof x;\n`
    : `import { x } from '${what}';\nexport const y = x;\n`;

const ZONE = 'import-x/no-restricted-paths';
const PURE = 'no-restricted-imports';

describe('the lint refuses', () => {
  it.each([
    ['the engine', 'api/engine/new.ts', '../errors.ts', ZONE],
    ['the engine, by alias', 'api/engine/new.ts', '#contract/common.ts', ZONE],
    ['the engine, a package', 'api/engine/new.ts', 'zod', PURE],
    ['the engine, Node itself', 'api/engine/new.ts', 'node:fs', PURE],
    ['the contract', 'api/contract/new.ts', '../errors.ts', ZONE],
    ['the client, the API', 'web/lib/new.ts', '../../api/errors.ts', ZONE],
    ['the client, the engine', 'web/lib/new.ts', '#engine/units.ts', ZONE],
    ['a client feature, the engine', 'web/features/rings/new.ts', '#engine/ring/breakdown.ts', ZONE],
    [
      'a Web Worker, more of the API than the engine',
      'web/features/rings/new.worker.ts',
      '../../../api/errors.ts',
      ZONE,
    ],
    ['a Web Worker, another feature', 'web/features/rings/new.worker.ts', '../home/home-queries.ts', ZONE],
    ['the API, the client', 'api/http/new.ts', '../../web/paths.ts', ZONE],
    ['the product, the tests', 'api/new.ts', '../tests/helpers/people.ts', ZONE],
    ['a migration, our code', 'migrations/20990101000000_new.ts', '../api/errors.ts', ZONE],
    ['a seed, more than the contract', 'seeds/99_new.ts', '../api/errors.ts', ZONE],
    ['the toolbox, the network', 'web/ui/new.ts', '../api/call.ts', ZONE],
    ['the toolbox, a feature', 'web/lib/new.ts', '../features/session/session-queries.ts', ZONE],
    ['a client feature, a page', 'web/features/session/new.ts', '../../pages/limits.tsx', ZONE],
    ['a client feature, another one', 'web/features/session/new.ts', '../home/home-queries.ts', ZONE],
    ['an API feature, another one', 'api/features/session/new.ts', '../audit/audit-log.ts', ZONE],
    ['a feature, an adapter', 'api/features/session/session-service.ts', '../../adapters/mail/smtp-mail.ts', ZONE],
    ['routes, a store', 'api/features/session/session-routes.ts', './session-store.ts', ZONE],
    ['a service, HTTP', 'api/features/session/session-service.ts', '../../http/handle.ts', ZONE],
    ['a store, its service', 'api/features/session/session-store.ts', './session-service.ts', ZONE],
    ['a service, the database', 'api/features/session/session-service.ts', 'knex', PURE],
    ['routes, the database', 'api/features/session/session-routes.ts', 'pg', PURE],
  ])('%s: %s importing %s', async (_what, file, imported, rule) => {
    expect(await rulesBroken(file, importOf(imported))).toContain(rule);
    expect(await rulesBroken(file, importOf(imported, true))).toContain(rule);
  });

  it.each([
    ['a clock in the engine', 'api/engine/new.ts', 'export const at = () => Date.now();', 'no-restricted-globals'],
    ['chance in the engine', 'api/engine/new.ts', 'export const r = () => Math.random();', 'no-restricted-properties'],
    ['any', 'api/new.ts', 'export const f = (x: any) => x;', '@typescript-eslint/no-explicit-any'],
    ['a default export', 'api/new.ts', 'export default 1;', 'import-x/no-default-export'],
  ])('%s', async (_what, file, code, rule) => {
    expect(await rulesBroken(file, code)).toContain(rule);
  });

  it('a circle of imports', async () => {
    const circle = importOf('./session-routes.ts');
    expect(await rulesBroken('api/features/session/session-service.ts', circle)).toContain('import-x/no-cycle');
  });
});

describe('the lint allows', () => {
  it.each([
    ['api/engine/track/new.ts', '../units.ts'],
    ['api/engine/new.ts', '#engine/units.ts'],
    ['api/contract/new.ts', './common.ts'],
    ['web/features/session/new.ts', '#contract/session.ts'],
    ['web/pages/new.ts', '../features/session/session-queries.ts'],
    ['web/features/rings/new.worker.ts', '#engine/ring/breakdown.ts'],
    ['api/features/session/session-routes.ts', './session-service.ts'],
    ['api/features/session/session-store.ts', 'knex'],
    ['api/features/session/session-service.ts', '../../ports/clock.ts'],
    ['api/container.ts', './adapters/mail/smtp-mail.ts'],
    ['seeds/99_new.ts', '#contract/roles.ts'],
    ['tests/new.test.ts', '../api/errors.ts'],
  ])('%s importing %s', async (file, imported) => {
    const broken = await rulesBroken(file, importOf(imported));
    expect(broken.filter((rule) => rule.startsWith('import-x') || rule.startsWith('no-restricted'))).toEqual([]);
  });

  it('nothing by way of a file that is missing from the zones: each feature folder is guarded', async () => {
    for (const where of ['api/features', 'web/features']) {
      const features = readdirSync(join(ROOT, where));
      for (const feature of features) {
        const other = features.find((name) => name !== feature)!;
        const file = readdirSync(join(ROOT, where, other)).find((name) => name.endsWith('.ts'));
        if (!file) continue;
        expect([feature, await rulesBroken(`${where}/${feature}/new.ts`, importOf(`../${other}/${file}`))]).toEqual([
          feature,
          expect.arrayContaining([ZONE]),
        ]);
      }
    }
  });
});
