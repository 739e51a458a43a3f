import { randomBytes } from 'node:crypto';
import { freePort } from '#server/postgres/free-port.mjs';
import { untilListening } from '#server/setup/address.mjs';
import { startChild } from '#server/setup/child.mjs';
import { administer, databaseUrl } from '#tests/setup/administer.ts';
import { SEEDED } from './global-setup.ts';

/** The built application as it is served, over a database of its own. */
export interface Served {
  readonly origin: string;
  readonly databaseUrl: string;
  /** Stops the server and keeps its data; `start` brings it back at the same address. */
  stop(): Promise<void>;
  start(): Promise<void>;
}

export async function serve(): Promise<Served & { remove(): Promise<void> }> {
  const postgres = process.env['EVENLINE_E2E_POSTGRES'] ?? '';
  const name = `e2e_${randomBytes(8).toString('hex')}`;
  await administer(postgres, `create database ${name} template ${SEEDED}`);
  const url = databaseUrl(postgres, name);
  const port = await freePort(0);
  if (port === null) throw new Error('No free port on loopback.');
  const env = { ...process.env, NODE_ENV: 'production', LOG_LEVEL: 'warn', HOST: '127.0.0.1', PORT: String(port), DATABASE_URL: url };
  let child: ReturnType<typeof startChild> | null = null;
  const served = {
    origin: `http://localhost:${port}`,
    databaseUrl: url,
    start: async () => {
      child = startChild(['--import', 'tsx', 'server/index.ts'], { cwd: process.cwd(), env });
      const over = new AbortController();
      const ended = child.ended.then((code) => {
        over.abort();
        throw new Error(`The server ended with code ${code} before it listened; what it said stands above.`);
      });
      // Once it listens, its end is the test's own doing.
      ended.catch(() => undefined);
      await Promise.race([untilListening(port, '127.0.0.1', over.signal), ended]);
    },
    stop: async () => {
      await child?.stop();
      child = null;
    },
    remove: async () => {
      await served.stop();
      await administer(postgres, `drop database if exists ${name} with (force)`);
    },
  };
  await served.start();
  return served;
}
