import { and, eq } from 'drizzle-orm';
import { type Action, teamRoleMay } from '#server/auth/permissions.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { teams } from '#server/db/schema/teams.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { MemberRole } from '#shared/api/auth.ts';
import { requireUser } from './require-user.ts';

export interface TeamAccess {
  readonly userId: string;
  readonly role: MemberRole;
  readonly team: { readonly id: string; readonly name: string; readonly kind: 'crew' | 'organiser' };
}

/** The caller's place in a team, if the role may do `action` there. A team one is not in does not exist. */
export async function requireTeam(ctx: ServiceContext, teamId: string, action: Action): Promise<TeamAccess> {
  const userId = requireUser(ctx);
  const [row] = await ctx.db
    .select({ role: memberships.role, id: teams.id, name: teams.name, kind: teams.kind })
    .from(memberships)
    .innerJoin(teams, eq(teams.id, memberships.teamId))
    .where(and(eq(memberships.teamId, teamId), eq(memberships.userId, userId)));
  if (!row) throw new ServiceError('NOT_FOUND', 'There is no such team, or you are not in it.');
  if (!teamRoleMay(row.role, action)) throw forbidden();
  return { userId, role: row.role, team: { id: row.id, name: row.name, kind: row.kind } };
}

export const forbidden = (): ServiceError =>
  new ServiceError('FORBIDDEN', 'Your role in this team may not do that. Ask the manager or the navigator.');
