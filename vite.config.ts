import { fileURLToPath } from 'node:url';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const node = { root: at('.'), environment: 'node' as const, execArgv: ['--import', 'tsx'] };

export default defineConfig({
  root: at('web'),
  plugins: [react(), tailwindcss()],
  resolve: { alias: { '#contract': at('api/contract'), '#engine': at('api/engine') } },
  worker: { format: 'es' },
  build: { outDir: at('dist/web'), emptyOutDir: true, target: 'es2023', chunkSizeWarningLimit: 1500 },
  // Not '/api': the dev server serves the client's own web/api modules from there.
  server: { proxy: { '/api/v1': process.env.API_URL ?? 'http://127.0.0.1:3000' } },
  test: {
    reporters: ['default', at('tests/helpers/count-reporter.ts')],
    projects: [
      {
        extends: true,
        test: { ...node, name: 'engine', include: ['tests/{engine,verification}/**/*.test.ts'], testTimeout: 60_000 },
      },
      {
        extends: true,
        test: {
          ...node,
          name: 'api',
          include: ['tests/{stores,services,http,jobs,faults,house,intake}/**/*.test.ts'],
          globalSetup: [at('tests/helpers/database-template.ts')],
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          root: at('.'),
          name: 'web',
          environment: 'jsdom',
          include: ['tests/web/**/*.test.{ts,tsx}'],
          setupFiles: [at('tests/helpers/web-setup.ts')],
          testTimeout: 30_000,
        },
      },
      {
        extends: true,
        test: {
          ...node,
          name: 'journeys',
          include: ['tests/journeys/**/*.test.ts'],
          globalSetup: [at('tests/helpers/product.ts')],
          testTimeout: 240_000,
          hookTimeout: 300_000,
          fileParallelism: false,
        },
      },
    ],
  },
});
