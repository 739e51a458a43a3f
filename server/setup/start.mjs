import { SetupError } from '#server/postgres/setup-error.mjs';
import { nextFreePort, untilListening } from './address.mjs';
import { ensureBuild } from './build.mjs';
import { startChild } from './child.mjs';
import { openDatabase, prepareDatabase } from './database.mjs';
import { main } from './main.mjs';
import { ensurePackages } from './packages.mjs';
import { checkNode } from './prerequisites.mjs';
import { say } from './progress.mjs';
import { ROOT } from './root.mjs';
import { aborted } from './stop-signal.mjs';

/** `npm start`: from a fresh clone, or the state a crash left, to a served application. */

const DEFAULT_PORT = 4100;

await main(async ({ signal, later }) => {
  checkNode();
  await ensurePackages(ROOT, signal);
  const database = await openDatabase(ROOT);
  later(database.release);
  const notes = await prepareDatabase(ROOT, database.url, signal);
  await ensureBuild(ROOT, signal);
  await serve(database.url, notes, signal, later);
});

/**
 * @param {string} url
 * @param {string} notes
 * @param {AbortSignal} signal
 * @param {(undo: () => Promise<void>) => void} later
 */
async function serve(url, notes, signal, later) {
  if (signal.aborted) return;
  const wanted = Number(process.env['PORT'] || DEFAULT_PORT);
  const port = await nextFreePort(wanted);
  if (port !== wanted) say(`Port ${wanted} is in use, so this is another address: runs recorded at the first one stay there.`);
  const env = { NODE_ENV: 'production', LOG_LEVEL: 'warn', ...process.env, DATABASE_URL: url, PORT: String(port) };
  const server = startChild(['--import', 'tsx', 'server/index.ts'], { cwd: ROOT, env });
  later(server.stop);
  const over = new AbortController();
  const ended = server.ended.then(() => over.abort());
  await Promise.race([untilListening(port, process.env['HOST'] || '127.0.0.1', over.signal), ended, aborted(signal)]);
  if (!over.signal.aborted && !signal.aborted) {
    const scheme = process.env['TLS_CERT'] ? 'https' : 'http';
    console.log(`\nEvenline is at ${process.env['PUBLIC_ORIGIN'] || `${scheme}://localhost:${port}`}   (Ctrl-C stops it)\n`);
    if (notes !== '') console.log(`${notes}\n`);
  }
  await Promise.race([ended, aborted(signal)]);
  if (!signal.aborted) throw new SetupError('The server stopped by itself. What it said stands above; start again.');
}
