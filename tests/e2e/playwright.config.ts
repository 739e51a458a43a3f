import { defineConfig } from 'playwright/test';
import { CHROMIUM } from '#tests/setup/chromium.mjs';

const report = process.env['EVENLINE_E2E_REPORT'];

/** One worker: two cores, and the cockpit's timings are part of what is tested. */
export default defineConfig({
  testDir: '.',
  outputDir: '../../test-results',
  globalSetup: './global-setup.ts',
  workers: 1,
  retries: 0,
  timeout: 120_000,
  expect: { timeout: 10_000 },
  reporter: report === undefined ? [['list']] : [['list'], ['json', { outputFile: report }]],
  use: {
    viewport: { width: 1280, height: 800 },
    trace: 'retain-on-failure',
    launchOptions: { executablePath: CHROMIUM, args: ['--no-sandbox', '--disable-background-networking'] },
  },
});
