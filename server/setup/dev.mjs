import { nextFreePort } from './address.mjs';
import { startChild } from './child.mjs';
import { openDatabase, prepareDatabase } from './database.mjs';
import { main } from './main.mjs';
import { ensurePackages } from './packages.mjs';
import { checkNode } from './prerequisites.mjs';
import { ROOT } from './root.mjs';
import { aborted } from './stop-signal.mjs';

/** `npm run dev`: the same database, the server started anew on every change, the pages through Vite. */

await main(async ({ signal, later }) => {
  checkNode();
  await ensurePackages(ROOT, signal);
  const database = await openDatabase(ROOT);
  later(database.release);
  const notes = await prepareDatabase(ROOT, database.url, signal);
  if (signal.aborted) return;
  const port = await nextFreePort(Number(process.env['PORT'] || 4100));
  const pages = await nextFreePort(Number(process.env['DEV_PORT'] || 5173));
  const env = { ...process.env, DATABASE_URL: database.url, PORT: String(port), DEV_PORT: String(pages) };
  const server = startChild(['node_modules/tsx/dist/cli.mjs', 'watch', '--clear-screen=false', 'server/index.ts'], { cwd: ROOT, env });
  later(server.stop);
  const vite = startChild(['node_modules/vite/bin/vite.js', '--strictPort'], { cwd: ROOT, env });
  later(vite.stop);
  console.log(`\nEvenline in development is at http://localhost:${pages}   (Ctrl-C stops it)\n`);
  if (notes !== '') console.log(`${notes}\n`);
  await Promise.race([server.ended, vite.ended, aborted(signal)]);
});
