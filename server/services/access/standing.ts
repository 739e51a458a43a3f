import { type SQL, sql } from 'drizzle-orm';
import type { Actor } from '#server/auth/actor.ts';
import { type Action, type EventOffice, officeMay, PERMISSIONS, teamRoleMay } from '#server/auth/permissions.ts';
import type { ServiceError } from '#server/service-error.ts';
import type { MemberRole } from '#shared/api/auth.ts';
import { forbidden } from './require-team.ts';

/** What an actor is to an entry: role in its team, offices at its event. */
export interface Standing {
  readonly role: MemberRole | null;
  readonly offices: readonly EventOffice[];
}

/**
 * Columns for a query over `entries`, so that standing costs no question of its own. Nobody's id: no standing. The names
 * are written out: in a query over one table Drizzle drops table names, and inside a subquery they would mean another column.
 */
export function standingOf(actor: Actor) {
  const userId = actor.kind === 'user' ? actor.userId : null;
  const role: SQL<MemberRole | null> = sql`(select m.role from memberships m
    where m.team_id = entries.team_id and m.user_id = ${userId}::uuid)`;
  const offices: SQL<EventOffice[]> = sql`array(select e.role::text from event_members e
    where e.event_id = entries.event_id and e.user_id = ${userId}::uuid)`;
  return { role, offices };
}

/** Throws `missing` to whoever has nothing to do with the entry, FORBIDDEN to whoever has, and may not do this. */
export function requireStanding(actor: Actor, entryId: string, standing: Standing, action: Action, missing: ServiceError): void {
  if (actor.kind === 'grant') {
    if (actor.entryId !== entryId) throw missing;
    if (!PERMISSIONS[action].grant) throw forbidden();
    return;
  }
  if (standing.role === null && standing.offices.length === 0) throw missing;
  const may = (standing.role !== null && teamRoleMay(standing.role, action)) || officeMay(standing.offices, action);
  if (!may) throw forbidden();
}
