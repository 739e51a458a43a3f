import { defineConfig } from 'vitest/config';

/**
 * Rooms of tests: `unit` needs nothing and is quick, `long` needs nothing but time (whole drives, recordings), `client` a made-up
 * browser, `api` PostgreSQL, `build` a finished `npm run build`.
 */
export default defineConfig({
  test: {
    projects: [
      {
        test: {
          name: 'unit',
          environment: 'node',
          include: ['tests/unit/**/*.test.ts', 'tests/lint/**/*.test.ts'],
          exclude: ['**/*.long.test.ts'],
          // pure functions: one world for all files saves loading it anew for each
          isolate: false,
        },
      },
      {
        test: {
          name: 'long',
          environment: 'node',
          include: ['tests/unit/**/*.long.test.ts'],
          // against hanging, on a machine that has other work too; no measure of speed
          testTimeout: 120_000,
        },
      },
      {
        test: {
          name: 'client',
          environment: 'happy-dom',
          setupFiles: ['tests/client/setup.ts'],
          include: ['tests/client/**/*.test.{ts,tsx}'],
        },
      },
      {
        test: {
          name: 'api',
          environment: 'node',
          globalSetup: ['tests/setup/postgres.ts'],
          include: ['tests/api/**/*.test.ts'],
          hookTimeout: 60_000,
          testTimeout: 20_000,
        },
      },
      {
        test: {
          name: 'build',
          environment: 'node',
          include: ['tests/build/**/*.test.ts'],
        },
      },
    ],
  },
});
