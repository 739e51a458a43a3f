import { asc, eq } from 'drizzle-orm';
import { cars } from '#server/db/schema/cars.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { users } from '#server/db/schema/users.ts';
import { requireTeam } from '#server/services/access/require-team.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { TeamResponse } from '#shared/api/teams.ts';

export async function getTeam(ctx: ServiceContext, teamId: string): Promise<TeamResponse> {
  const { team, role } = await requireTeam(ctx, teamId, 'team.read');
  const members = await ctx.db
    .select({ userId: users.id, name: users.name, role: memberships.role })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, teamId))
    .orderBy(asc(memberships.role), asc(users.name));
  const garage = await ctx.db
    .select({ id: cars.id, name: cars.name, dialReadsHighPercent: cars.dialReadsHighPercent })
    .from(cars)
    .where(eq(cars.teamId, teamId))
    .orderBy(asc(cars.name));
  return { team, myRole: role, members, cars: garage };
}
