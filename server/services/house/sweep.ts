import { lt } from 'drizzle-orm';
import { signInFailures } from '#server/db/schema/sign-in-failures.ts';
import type { ServiceDeps } from '#server/services/context.ts';

const HOUR_MS = 3600 * 1000;

/** Removes what has run out and is asked for by nobody: sign-ins, and failures too old to count. */
export async function sweep(deps: Pick<ServiceDeps, 'db' | 'now' | 'authSessions'>): Promise<void> {
  await deps.authSessions.sweep();
  await deps.db.delete(signInFailures).where(lt(signInFailures.failedAt, new Date(deps.now() - HOUR_MS)));
}
