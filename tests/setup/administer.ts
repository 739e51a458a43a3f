import pg from 'pg';

/** One statement on a connection of its own, as creating and dropping databases asks. */
export async function administer(url: string, sql: string): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query(sql);
  } finally {
    await client.end();
  }
}

/** The same server, another database. */
export function databaseUrl(url: string, name: string): string {
  const other = new URL(url);
  other.pathname = `/${name}`;
  return other.href;
}
