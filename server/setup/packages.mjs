import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { runCommand } from '#server/postgres/run-command.mjs';
import { SetupError } from '#server/postgres/setup-error.mjs';
import { withStartLock } from '#server/postgres/start-lock.mjs';
import { step } from './progress.mjs';
import { readStamp, stampOf } from './stamp.mjs';

/** Brings node_modules in line with package-lock.json. Runs before any package exists. */

/** @typedef {Record<string, { version?: string, optional?: boolean, dev?: boolean }>} LockedPackages */

/** @param {string} path @returns {LockedPackages | null} */
function lockedPackages(path) {
  try {
    return JSON.parse(readFileSync(path, 'utf8')).packages;
  } catch {
    return null;
  }
}

/**
 * npm writes its own account of node_modules after the last package, so a broken-off install has none. Optional packages
 * for other machines are missing by right.
 *
 * @param {string} root
 */
export function isInstalled(root) {
  const wanted = lockedPackages(join(root, 'package-lock.json'));
  const held = lockedPackages(join(root, 'node_modules/.package-lock.json'));
  if (wanted === null || held === null) return false;
  return Object.entries(wanted).every(([name, { version, optional }]) => name === '' || optional || held[name]?.version === version);
}

/**
 * @param {string} root
 * @param {AbortSignal} signal
 */
export async function ensurePackages(root, signal) {
  const stampFile = join(root, 'node_modules/.evenline-lock');
  await withStartLock(join(root, 'node_modules'), async () => {
    const stamp = stampOf(root, ['package-lock.json']);
    if (readStamp(stampFile) === stamp) return;
    if (!isInstalled(root)) await step('Installing packages (up to two minutes the first time)', () => install(root, signal));
    writeFileSync(stampFile, `${stamp}\n`);
  });
}

/** @param {string} root @param {AbortSignal} signal */
async function install(root, signal) {
  // NODE_ENV=production would leave out the build's own tools.
  const args = ['ci', '--include=dev', '--no-audit', '--no-fund'];
  const { code, output } = await runCommand('npm', args, { cwd: root, signal });
  if (code !== 0)
    throw new SetupError(`${output}\nInstalling packages failed. Is there a connection? Try \`npm ci --include=dev\` by hand.`);
}
