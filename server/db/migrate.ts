import { fileURLToPath } from 'node:url';
import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate as runMigrations } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

const MIGRATIONS = fileURLToPath(new URL('../../drizzle', import.meta.url));
/** Any fixed number; every process that migrates this schema must use the same. */
const LOCK = 7_301_986;

/**
 * Brings the schema up to date. One process at a time: the advisory lock makes the others wait, then find nothing to do.
 */
export async function migrate(databaseUrl: string): Promise<void> {
  const client = new pg.Client({ connectionString: databaseUrl, application_name: 'evenline migrate' });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [LOCK]);
    await runMigrations(drizzle({ client }), { migrationsFolder: MIGRATIONS });
  } finally {
    await client.end();
  }
}
