import { ConfigError, readConfig } from '#server/config.ts';
import { connect } from '#server/db/connect.ts';
import { migrate } from '#server/db/migrate.ts';
import { createReplayThread } from '#server/jobs/replay-thread.ts';
import { serviceDeps } from '#server/service-deps.ts';
import { demoNotes, seedDemo } from '#server/services/demo/seed-demo.ts';
import { VERSION } from '#server/version.ts';

/** Migrates, and fills an empty database with the demo. Prints what whoever starts the server should know. */
async function main(): Promise<void> {
  const { databaseUrl } = readConfig(process.env);
  await migrate(databaseUrl);
  // The demo is one transaction in which the database waits while cars are driven.
  const connection = connect(databaseUrl, { max: 1, patient: true });
  const thread = createReplayThread();
  try {
    const deps = serviceDeps(connection, async () => undefined);
    await seedDemo(deps, { replay: thread.replay, appVersion: VERSION });
    const notes = await demoNotes(deps);
    if (notes !== null) console.log(notes);
  } finally {
    await thread.close();
    await connection.close();
  }
}

await main().catch((error: unknown) => {
  console.error(error instanceof ConfigError ? error.message : error);
  process.exit(1);
});
