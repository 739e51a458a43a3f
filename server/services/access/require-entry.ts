import { and, eq } from 'drizzle-orm';
import { type Action, officeMay, PERMISSIONS, teamRoleMay } from '#server/auth/permissions.ts';
import { entries } from '#server/db/schema/entries.ts';
import { eventMembers } from '#server/db/schema/event-members.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { forbidden } from './require-team.ts';

export interface EntryAccess {
  readonly id: string;
  readonly eventId: string;
  readonly teamId: string;
}

/** An entry, if the caller may do `action` on it by team role, by office at its event, or by upload grant. */
export async function requireEntry(ctx: ServiceContext, entryId: string, action: Action): Promise<EntryAccess> {
  if (ctx.actor.kind === 'anonymous') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  const missing = new ServiceError('NOT_FOUND', 'There is no such entry, or it is not your team’s.');
  const [entry] = await ctx.db
    .select({ id: entries.id, eventId: entries.eventId, teamId: entries.teamId })
    .from(entries)
    .where(eq(entries.id, entryId));
  if (!entry) throw missing;
  if (ctx.actor.kind === 'grant') {
    if (ctx.actor.entryId !== entryId) throw missing;
    if (!PERMISSIONS[action].grant) throw forbidden();
    return entry;
  }
  const standing = await standingOf(ctx, ctx.actor.userId, entry);
  if (standing.role === null && standing.offices.length === 0) throw missing;
  if ((standing.role !== null && teamRoleMay(standing.role, action)) || officeMay(standing.offices, action)) return entry;
  throw forbidden();
}

async function standingOf(ctx: ServiceContext, userId: string, entry: EntryAccess) {
  const [membership] = await ctx.db
    .select({ role: memberships.role })
    .from(memberships)
    .where(and(eq(memberships.teamId, entry.teamId), eq(memberships.userId, userId)));
  const offices = await ctx.db
    .select({ role: eventMembers.role })
    .from(eventMembers)
    .where(and(eq(eventMembers.eventId, entry.eventId), eq(eventMembers.userId, userId)));
  return { role: membership?.role ?? null, offices: offices.map((row) => row.role) };
}
