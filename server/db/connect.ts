import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';

/** The pool and Drizzle over it. A transaction is a `Database` too, so that verbs may be nested. */
export type Database = Pick<
  NodePgDatabase,
  'select' | 'selectDistinct' | 'selectDistinctOn' | 'insert' | 'update' | 'delete' | 'execute' | 'transaction'
>;

export interface Connection {
  readonly db: NodePgDatabase;
  readonly pool: pg.Pool;
  close(): Promise<void>;
}

/** Waiting for a connection, and any one statement, end after this long: an exhausted pool answers 503, never hangs. */
const PATIENCE_MS = 5000;

export interface ConnectOptions {
  readonly max?: number;
  /** For work that is nobody's request: statements and pauses inside a transaction may take as long as they need. */
  readonly patient?: boolean;
  readonly onIdleError?: (error: Error) => void;
}

export function connect(databaseUrl: string, options: ConnectOptions = {}): Connection {
  const limits = options.patient ? {} : { statement_timeout: PATIENCE_MS, idle_in_transaction_session_timeout: 2 * PATIENCE_MS };
  const pool = new pg.Pool({
    connectionString: databaseUrl,
    max: options.max ?? 10,
    connectionTimeoutMillis: PATIENCE_MS,
    application_name: 'evenline',
    ...limits,
  });
  // Without a listener, a connection that the database drops while idle would end the process.
  pool.on('error', options.onIdleError ?? (() => undefined));
  return { db: drizzle({ client: pool }), pool, close: () => pool.end() };
}

const BUSY_CODES = new Set(['57014', '53300', '57P01', '57P03', 'ECONNREFUSED', 'ECONNRESET', '25P03']);

/** True for failures that pass: no free connection, a statement over its time, the database restarting. */
export function isBusy(error: unknown): boolean {
  for (let cause = error; cause instanceof Error; cause = cause.cause) {
    if (/timeout exceeded when trying to connect|Connection terminated/.test(cause.message)) return true;
    if ('code' in cause && typeof cause.code === 'string' && BUSY_CODES.has(cause.code)) return true;
  }
  return false;
}

/** Name of the unique constraint that refused a row, or null where the failure is another. */
export function violatedUnique(error: unknown): string | null {
  for (let cause = error; cause instanceof Error; cause = cause.cause) {
    if (cause instanceof pg.DatabaseError && cause.code === '23505') return cause.constraint ?? '';
  }
  return null;
}
