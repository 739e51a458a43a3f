import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { connect } from '#server/db/connect.ts';
import { migrate } from '#server/db/migrate.ts';
import { startReplayQueue } from '#server/jobs/replay-queue.ts';
import { sweep } from '#server/services/house/sweep.ts';
import { createApp } from './app.ts';
import { type Config, ConfigError, readConfig, servesSecurely } from './config.ts';
import { closeServer, listen } from './listen.ts';
import { createLogger } from './log.ts';
import { serviceDeps } from './service-deps.ts';

/** Boot, serve, and an orderly end. */

const DIST = fileURLToPath(new URL('../dist', import.meta.url));
const GRACE_MS = 5000;
const SWEEP_MS = 3600 * 1000;

async function start(config: Config): Promise<() => Promise<void>> {
  const logger = createLogger(config.logLevel);
  await migrate(config.databaseUrl);
  const connection = connect(config.databaseUrl, { onIdleError: (error) => logger.warn({ err: error }, 'database connection lost') });
  const queue = await startReplayQueue({ databaseUrl: config.databaseUrl, db: connection.db, now: Date.now, logger });
  const deps = serviceDeps(connection, (runId) => queue.ask(runId));
  const app = createApp({ config, deps, logger, dist: existsSync(DIST) ? DIST : null });
  const server = await listen(app, config);
  const sweepNow = () => sweep(deps).catch((error: unknown) => logger.error({ err: error }, 'sweeping'));
  await sweepNow();
  const sweeping = setInterval(sweepNow, SWEEP_MS).unref();
  const outdated = await queue.askOutdated();
  logger.info({ host: config.host, port: config.port, secure: servesSecurely(config), outdated }, 'listening');
  return async () => {
    clearInterval(sweeping);
    await closeServer(server, GRACE_MS);
    await queue.stop();
    await connection.close();
    logger.info('stopped');
  };
}

async function main(): Promise<void> {
  try {
    const stop = await start(readConfig(process.env));
    for (const signal of ['SIGINT', 'SIGTERM'] as const) {
      process.once(signal, () => {
        stop().then(
          () => process.exit(0),
          () => process.exit(1),
        );
      });
    }
  } catch (error) {
    console.error(error instanceof ConfigError ? error.message : error);
    process.exit(1);
  }
}

await main();
