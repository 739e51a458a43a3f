import { eq } from 'drizzle-orm';
import type { Action } from '#server/auth/permissions.ts';
import { entries } from '#server/db/schema/entries.ts';
import { runs } from '#server/db/schema/runs.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { requireStanding, standingOf } from './standing.ts';

export type RunRow = typeof runs.$inferSelect;

/**
 * A run, if the caller may do `action` on its entry. With `lock` the row is held until the transaction ends, so that two
 * uploads of one run come one after the other.
 */
export async function requireRun(ctx: ServiceContext, runId: string, action: Action, lock = false): Promise<RunRow> {
  if (ctx.actor.kind === 'anonymous') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  const missing = new ServiceError('RUN_NOT_FOUND', 'The server holds no such run of yours. Send its header first.');
  const query = ctx.db
    .select({ run: runs, ...standingOf(ctx.actor) })
    .from(runs)
    .innerJoin(entries, eq(entries.id, runs.entryId))
    .where(eq(runs.id, runId));
  const [row] = lock ? await query.for('update', { of: runs }) : await query;
  if (!row) throw missing;
  requireStanding(ctx.actor, row.run.entryId, row, action, missing);
  return row.run;
}
