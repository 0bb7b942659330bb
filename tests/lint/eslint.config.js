import { existsSync, readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import js from '@eslint/js';
import { createTypeScriptImportResolver } from 'eslint-import-resolver-typescript';
import { importX } from 'eslint-plugin-import-x';
import reactHooks from 'eslint-plugin-react-hooks';
import globals from 'globals';
import tseslint from 'typescript-eslint';

const root = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

const no = (target, from, message, except) => ({ target, from, message, ...(except && { except }) });
const rooms = (where) =>
  (existsSync(`${root}/${where}`) ? readdirSync(`${root}/${where}`) : []).map((feature) =>
    no(`./${where}/${feature}`, `./${where}`, 'Features meet one floor up.', [`./${feature}`]),
  );

const clientSees = (...what) => no('./web', './api', 'The client sees only the contract.', what);

const zones = [
  no('./api/engine', './api', 'The engine knows nothing but itself.', ['./engine']),
  no('./api/contract', './api', 'The contract knows nothing but itself.', ['./contract']),
  clientSees('./contract'),
  no('./api', './web', 'The API never imports the client.'),
  no(['./api', './web'], './tests', 'Nothing imports the tests.'),
  no('./migrations', ['./api', './web'], 'A migration must still run when the code has moved on.'),
  no('./seeds', './api', 'Seeds know only the contract.', ['./contract']),
  no(
    ['./web/ui', './web/lib'],
    ['./web/api', './web/features', './web/pages'],
    'The toolbox knows no feature and no network.',
  ),
  no('./web/features', './web/pages', 'Pages use features, not the reverse.'),
  no('./api/features', './api/adapters', 'Services ask for ports; only the container knows the adapters.'),
  no('./api/features/*/*-routes.ts', './api/features/*/*-store.ts', 'Routes ask services.'),
  no('./api/features/*/*-service.ts', './api/http', 'Services do not know HTTP.'),
  no(
    './api/features/*/*-store.ts',
    ['./api/features/*/*-service.ts', './api/features/*/*-routes.ts'],
    'Stores look down only.',
  ),
  ...rooms('api/features'),
  ...rooms('web/features'),
];

/** A Web Worker of the client may run the engine, so that both sides compute with one source; nothing else there may. */
const zonesOfWebWorkers = zones.map((zone) => (zone.target === './web' ? clientSees('./contract', './engine') : zone));

const forbidInEngine = ['process', 'console', 'fetch', 'setTimeout', 'setInterval', 'performance', 'Date'];

export default tseslint.config(
  { ignores: ['dist/**', '.data/**', 'node_modules/**'] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  {
    files: ['**/*.{ts,tsx,js,mjs}'],
    plugins: { 'import-x': importX },
    languageOptions: { globals: { ...globals.node } },
    settings: {
      ...importX.flatConfigs.typescript.settings,
      'import-x/resolver-next': [createTypeScriptImportResolver({ project: root })],
    },
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'import-x/no-cycle': 'error',
      'import-x/no-restricted-paths': ['error', { basePath: root, zones }],
    },
  },
  {
    files: ['web/**/*.worker.ts'],
    rules: { 'import-x/no-restricted-paths': ['error', { basePath: root, zones: zonesOfWebWorkers }] },
  },
  {
    files: ['api/**/*.{ts,mjs}', 'web/**/*.{ts,tsx}', 'tests/**/*.{ts,tsx}'],
    ignores: ['tests/helpers/count-reporter.ts', 'tests/helpers/database-template.ts'],
    rules: { 'import-x/no-default-export': 'error' },
  },
  {
    files: ['api/engine/**/*.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { patterns: [{ regex: '^(?!\\.|#engine/)', message: 'The engine is pure.' }] },
      ],
      'no-restricted-globals': ['error', ...forbidInEngine.map((name) => ({ name, message: 'The engine is pure.' }))],
      'no-restricted-properties': [
        'error',
        { object: 'Math', property: 'random', message: 'No hidden randomness in the engine.' },
      ],
    },
  },
  {
    files: ['api/features/*/*-{routes,service}.ts'],
    rules: {
      'no-restricted-imports': [
        'error',
        { paths: ['knex', 'pg'].map((name) => ({ name, message: 'Only stores and readers talk to the database.' })) },
      ],
    },
  },
  {
    files: ['web/**/*.{ts,tsx}', 'tests/web/**/*.{ts,tsx}'],
    plugins: { 'react-hooks': reactHooks },
    languageOptions: { globals: { ...globals.browser } },
    rules: { 'react-hooks/rules-of-hooks': 'error', 'react-hooks/exhaustive-deps': 'error' },
  },
);
