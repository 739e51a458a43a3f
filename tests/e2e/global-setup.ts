import { existsSync } from 'node:fs';
import { openDisposableCluster } from '#server/postgres/cluster.mjs';
import { runCommand } from '#server/postgres/run-command.mjs';
import { administer, databaseUrl } from '#tests/setup/administer.ts';

/** One cluster for the run, with a migrated and seeded database that every worker's own database is copied from. */
export const SEEDED = 'evenline_seeded';

export default async function globalSetup(): Promise<() => Promise<void>> {
  if (!existsSync('dist/index.html')) throw new Error('dist/ holds no build: run `npm run build` first.');
  const given = process.env['DATABASE_URL'];
  const cluster = given ? null : await openDisposableCluster((text) => console.error(text));
  const url = cluster?.url ?? given ?? '';
  await administer(url, `drop database if exists ${SEEDED} with (force)`);
  await administer(url, `create database ${SEEDED}`);
  const env = { ...process.env, DATABASE_URL: databaseUrl(url, SEEDED) };
  const prepared = await runCommand(process.execPath, ['--import', 'tsx', 'server/cli/prepare-database.ts'], { env });
  if (prepared.code !== 0) throw new Error(prepared.output);
  process.env['EVENLINE_E2E_POSTGRES'] = url;
  return async () => {
    await administer(url, `drop database if exists ${SEEDED} with (force)`);
    await cluster?.release();
  };
}
