import { defineConfig } from 'vitest/config';

/** One project per kind of test; the browser's one starts the whole application first. */
export default defineConfig({
  test: {
    maxWorkers: 2,
    reporters: ['default', './tests/support/closing-line.ts'],
    projects: [
      {
        test: {
          name: 'pure',
          include: ['tests/{reference,engine,reader,simulation,client}/**/*.test.ts'],
          testTimeout: 120_000,
        },
      },
      {
        test: {
          name: 'api',
          include: ['tests/{api,commands}/**/*.test.ts'],
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
      {
        test: {
          name: 'browser',
          include: ['tests/browser/**/*.test.ts'],
          globalSetup: ['tests/support/served-app.ts'],
          testTimeout: 90_000,
          hookTimeout: 120_000,
          fileParallelism: false,
        },
      },
    ],
  },
});
