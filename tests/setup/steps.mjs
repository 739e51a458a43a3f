import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ROOT } from '#server/setup/root.mjs';
import { playwrightTally, stepTally, vitestTally } from './tally.mjs';

/**
 * The steps that `npm run check` and `npm test` are made of. Each shows its runner's own output as it comes, and counts.
 *
 * @typedef {import('./tally.mjs').Tally} Tally
 * @typedef {{ name: string, run: (signal: AbortSignal) => Promise<Tally> }} Step
 */

const BIN = join(ROOT, 'node_modules');

/**
 * @param {readonly string[]} args of Node
 * @param {AbortSignal} signal
 * @param {NodeJS.ProcessEnv} [env]
 * @returns {Promise<number>} the exit code
 */
async function node(args, signal, env = {}) {
  const child = spawn(process.execPath, args, { cwd: ROOT, stdio: ['ignore', 'inherit', 'inherit'], env: { ...process.env, ...env } });
  const stop = () => child.kill('SIGTERM');
  signal.addEventListener('abort', stop, { once: true });
  const [code] = await once(child, 'exit');
  signal.removeEventListener('abort', stop);
  return code ?? 1;
}

/** @param {number} exitCode @returns {Tally} a command that counts as one test */
const oneTest = (exitCode) => (exitCode === 0 ? { passed: 1, failed: 0, skipped: 0 } : { passed: 0, failed: 1, skipped: 0 });

/**
 * @param {(report: string) => Promise<number>} run
 * @param {(report: string) => Tally | null} read
 * @returns {Promise<Tally>}
 */
async function reported(run, read) {
  const folder = mkdtempSync(join(tmpdir(), 'evenline-report-'));
  const report = join(folder, 'report.json');
  try {
    const code = await run(report);
    return stepTally(read(report), code);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** @param {string} project @returns {Step} */
function vitest(project) {
  const args = [join(BIN, 'vitest/vitest.mjs'), 'run', '--project', project, '--reporter=default', '--reporter=json'];
  return {
    name: `${project} tests`,
    run: (signal) => reported((report) => node([...args, `--outputFile.json=${report}`], signal), vitestTally),
  };
}

/** @type {Step} */
const types = {
  name: 'types',
  run: async (signal) => {
    let worst = 0;
    for (const room of ['shared', 'server', 'src', 'tests']) {
      // Told what was checked last time, the compiler looks only at what has changed.
      const memory = ['--incremental', '--tsBuildInfoFile', join(BIN, `.cache/evenline/${room}.tsbuildinfo`)];
      worst = Math.max(worst, await node([join(BIN, 'typescript/bin/tsc'), '-p', room, ...memory], signal));
    }
    return oneTest(worst);
  },
};

/** @type {Step} */
const lint = {
  name: 'lint',
  run: async (signal) => oneTest(await node([join(BIN, '@biomejs/biome/bin/biome'), 'check', '--error-on-warnings', '.'], signal)),
};

/** @type {Step} */
const build = { name: 'build', run: async (signal) => oneTest(await node([join(BIN, 'vite/bin/vite.js'), 'build'], signal)) };

/** @type {Step} */
const browser = {
  name: 'browser tests',
  run: (signal) => {
    const args = [join(BIN, 'playwright/cli.js'), 'test', '-c', 'tests/e2e/playwright.config.ts'];
    return reported((report) => node(args, signal, { EVENLINE_E2E_REPORT: report }), playwrightTally);
  },
};

export const CHECK_STEPS = [types, lint, vitest('unit')];
export const ALL_STEPS = [...CHECK_STEPS, vitest('long'), vitest('client'), vitest('api'), build, vitest('build'), browser];
