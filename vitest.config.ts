import { defineConfig } from 'vitest/config';

/** One run, four projects: pure units, components, the API on a real PostgreSQL, the product in a real browser. */
export default defineConfig({
  test: {
    reporters: ['default', './tests/support/closing-line.ts'],
    coverage: { provider: 'v8' },
    projects: [
      {
        extends: true,
        test: { name: 'unit', include: ['{schemas,analysis,backend,frontend,tests/documents}/**/*.test.ts'], testTimeout: 30_000 },
      },
      {
        extends: true,
        test: { name: 'dom', include: ['frontend/**/*.test.tsx'], environment: 'happy-dom' },
      },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/{api,database}/**/*.test.ts'],
          globalSetup: './tests/support/cluster.ts',
          maxWorkers: 2,
          sequence: { groupOrder: 1 },
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'browser',
          include: ['tests/browser/**/*.test.ts'],
          globalSetup: './tests/support/cluster.ts',
          fileParallelism: false,
          sequence: { groupOrder: 2 },
          testTimeout: 180_000,
          hookTimeout: 240_000,
        },
      },
    ],
  },
});
