import { readFileSync } from 'node:fs';
import { createServer as createHttpServer, type Server } from 'node:http';
import { createServer as createHttpsServer } from 'node:https';
import type { Express } from 'express';
import { type Config, ConfigError } from './config.ts';

/** Listens where the settings say, by TLS where they name a certificate. */
export function listen(app: Express, config: Config): Promise<Server> {
  const server = config.tls === null ? createHttpServer(app) : createHttpsServer(readTls(config.tls), app);
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => reject(explain(error, config)));
    server.listen(config.port, config.host, () => resolve(server));
  });
}

function readTls({ certFile, keyFile }: NonNullable<Config['tls']>): { readonly cert: Buffer; readonly key: Buffer } {
  try {
    return { cert: readFileSync(certFile), key: readFileSync(keyFile) };
  } catch (error) {
    throw new ConfigError(`TLS_CERT or TLS_KEY cannot be read: ${error instanceof Error ? error.message : String(error)}`);
  }
}

function explain(error: NodeJS.ErrnoException, config: Config): Error {
  if (error.code === 'EADDRINUSE') return new ConfigError(`Port ${config.port} on ${config.host} is in use. Set PORT to another.`);
  if (error.code === 'EACCES') return new ConfigError(`Port ${config.port} may not be opened by this user. Set PORT to one above 1023.`);
  return error;
}

/** Takes no new connections, lets running requests end within that time, then cuts the rest. */
export function closeServer(server: Server, graceMs: number): Promise<void> {
  return new Promise((resolve) => {
    const cut = setTimeout(() => server.closeAllConnections(), graceMs);
    server.close(() => {
      clearTimeout(cut);
      resolve();
    });
    server.closeIdleConnections();
  });
}
