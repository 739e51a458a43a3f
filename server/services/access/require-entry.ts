import { eq } from 'drizzle-orm';
import type { Action } from '#server/auth/permissions.ts';
import { entries } from '#server/db/schema/entries.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { requireStanding, standingOf } from './standing.ts';

export interface EntryAccess {
  readonly id: string;
  readonly eventId: string;
  readonly teamId: string;
}

/** An entry, if the caller may do `action` on it by team role, by office at its event, or by upload grant. */
export async function requireEntry(ctx: ServiceContext, entryId: string, action: Action): Promise<EntryAccess> {
  if (ctx.actor.kind === 'anonymous') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  const missing = new ServiceError('NOT_FOUND', 'There is no such entry, or it is not your team’s.');
  const [row] = await ctx.db
    .select({ id: entries.id, eventId: entries.eventId, teamId: entries.teamId, ...standingOf(ctx.actor) })
    .from(entries)
    .where(eq(entries.id, entryId));
  if (!row) throw missing;
  requireStanding(ctx.actor, row.id, row, action, missing);
  return { id: row.id, eventId: row.eventId, teamId: row.teamId };
}
