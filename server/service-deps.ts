import { createAuthSessions } from '#server/auth/auth-sessions.ts';
import type { Connection } from '#server/db/connect.ts';
import type { ServiceDeps } from '#server/services/context.ts';

/** The means every verb works with, over one connection pool. */
export function serviceDeps(connection: Connection, askReplay: ServiceDeps['askReplay'], now: () => number = Date.now): ServiceDeps {
  return { db: connection.db, authSessions: createAuthSessions(connection.db, now), now, askReplay };
}
