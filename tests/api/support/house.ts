import type { Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createApp } from '#server/app.ts';
import { readConfig } from '#server/config.ts';
import { type Connection, connect } from '#server/db/connect.ts';
import { type ReplayQueue, startReplayQueue } from '#server/jobs/replay-queue.ts';
import { closeServer, listen } from '#server/listen.ts';
import { createLogger } from '#server/log.ts';
import { serviceDeps } from '#server/service-deps.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import { createTestDatabase } from '#tests/setup/database.ts';

/** The whole server over a database of its own, on a free loopback port: the parts that run in earnest, none made up. */
export interface House {
  readonly origin: string;
  readonly url: string;
  readonly connection: Connection;
  readonly deps: ServiceDeps;
  readonly queue: ReplayQueue;
  /** Moves the server's clock on. */
  advance(ms: number): void;
  close(): Promise<void>;
}

export interface HouseOptions {
  readonly settings?: Readonly<Record<string, string>>;
  readonly poolMax?: number;
  readonly dist?: string;
  /** Without the limits a request works under. */
  readonly patient?: boolean;
}

export async function openHouse(options: HouseOptions = {}): Promise<House> {
  const database = await createTestDatabase();
  const config = readConfig({ DATABASE_URL: database.url, PORT: '0', LOG_LEVEL: 'silent', ...options.settings });
  const logger = createLogger(config.logLevel);
  const connection = connect(database.url, { max: options.poolMax ?? 6, patient: options.patient ?? false });
  let aheadMs = 0;
  const now = () => Date.now() + aheadMs;
  const queue = await startReplayQueue({ databaseUrl: database.url, db: connection.db, now, logger });
  const deps = serviceDeps(connection, (runId) => queue.ask(runId), now);
  const server: Server = await listen(createApp({ config, deps, logger, dist: options.dist ?? null }), config);
  const { port } = server.address() as AddressInfo;
  return {
    origin: `http://127.0.0.1:${port}`,
    url: database.url,
    connection,
    deps,
    queue,
    advance: (ms) => {
      aheadMs += ms;
    },
    async close() {
      await closeServer(server, 1000);
      await queue.stop();
      await connection.close();
      await database.drop();
    },
  };
}
