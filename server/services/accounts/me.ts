import { asc, eq } from 'drizzle-orm';
import { memberships } from '#server/db/schema/memberships.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireUser } from '#server/services/access/require-user.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { MeResponse } from '#shared/api/auth.ts';

export async function me(ctx: ServiceContext): Promise<MeResponse> {
  const userId = requireUser(ctx);
  const [user] = await ctx.db.select({ id: users.id, email: users.email, name: users.name }).from(users).where(eq(users.id, userId));
  if (!user) throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  const rows = await ctx.db
    .select({ id: teams.id, name: teams.name, kind: teams.kind, role: memberships.role })
    .from(memberships)
    .innerJoin(teams, eq(teams.id, memberships.teamId))
    .where(eq(memberships.userId, userId))
    .orderBy(asc(memberships.createdAt), asc(teams.id));
  return { user, teams: rows };
}
