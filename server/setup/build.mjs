import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { runCommand } from '#server/postgres/run-command.mjs';
import { SetupError } from '#server/postgres/setup-error.mjs';
import { withStartLock } from '#server/postgres/start-lock.mjs';
import { step } from './progress.mjs';
import { readStamp, stampOf } from './stamp.mjs';

const SOURCES = ['src', 'shared', 'public', 'index.html', 'vite.config.ts', 'package-lock.json', 'tsconfig.base.json'];

/**
 * Builds the pages into dist/ where the sources have changed since. The stamp is written last, so that a broken-off build
 * is built again.
 *
 * @param {string} root
 * @param {AbortSignal} signal
 */
export async function ensureBuild(root, signal) {
  const stampFile = join(root, 'dist/.vite/sources');
  await withStartLock(join(root, 'dist'), async () => {
    const stamp = stampOf(root, SOURCES);
    if (readStamp(stampFile) === stamp) return;
    await step('Building the pages', async () => {
      const vite = join(root, 'node_modules/vite/bin/vite.js');
      const { code, output } = await runCommand(process.execPath, [vite, 'build'], {
        cwd: root,
        signal,
        env: { ...process.env, NO_COLOR: '1' },
      });
      if (code !== 0) throw new SetupError(`${output}\nThe build failed. Try \`npm run check\`: it says where.`);
    });
    writeFileSync(stampFile, `${stamp}\n`);
  });
}
