import type { TestProject } from 'vitest/node';
import { migrate } from '#server/db/migrate.ts';
import { openDisposableCluster } from '#server/postgres/cluster.mjs';
import { administer, databaseUrl } from './administer.ts';

/**
 * PostgreSQL for a run of API tests: a cluster of its own, or the one that DATABASE_URL names. The schema is migrated once,
 * into a template that `createTestDatabase` copies.
 */
declare module 'vitest' {
  interface ProvidedContext {
    /** Where databases may be created. */
    postgresUrl: string;
    /** Name of the migrated database to copy. */
    templateDatabase: string;
  }
}

export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const given = process.env['DATABASE_URL'];
  const cluster = given === undefined || given === '' ? await openDisposableCluster((text) => console.error(text)) : null;
  const url = cluster?.url ?? given ?? '';
  const template = `evenline_template_${process.pid}`;
  await administer(url, `create database ${template}`);
  await migrate(databaseUrl(url, template));
  project.provide('postgresUrl', url);
  project.provide('templateDatabase', template);
  return async () => {
    await administer(url, `drop database if exists ${template} with (force)`);
    await cluster?.release();
  };
}
