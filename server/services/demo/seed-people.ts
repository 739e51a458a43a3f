import { hashPassword } from '#server/auth/passwords.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { CREW_TEAM, DEMO_PASSWORD, ORGANISER_TEAM, type Person } from './demo-cast.ts';

export interface DemoPeople {
  readonly crewTeamId: string;
  readonly organiserTeamId: string;
  /** User id by the part of the address before the @. */
  readonly userId: (key: string) => string;
}

export async function seedPeople(ctx: ServiceContext): Promise<DemoPeople> {
  const ids = new Map<string, string>();
  for (const person of [...CREW_TEAM.members, ...ORGANISER_TEAM.members]) ids.set(person.key, await insertPerson(ctx, person));
  const userId = (key: string): string => {
    const id = ids.get(key);
    if (id === undefined) throw new Error(`nobody is called ${key} in the demo`);
    return id;
  };
  const crewTeamId = await insertTeam(ctx, CREW_TEAM.name, 'crew');
  const organiserTeamId = await insertTeam(ctx, ORGANISER_TEAM.name, 'organiser');
  await ctx.db
    .insert(memberships)
    .values([
      ...CREW_TEAM.members.map(({ key, role }) => ({ teamId: crewTeamId, userId: userId(key), role })),
      ...ORGANISER_TEAM.members.map(({ key }) => ({ teamId: organiserTeamId, userId: userId(key), role: 'manager' as const })),
    ]);
  return { crewTeamId, organiserTeamId, userId };
}

async function insertPerson(ctx: ServiceContext, { email, name }: Person): Promise<string> {
  const [row] = await ctx.db
    .insert(users)
    .values({ email, name, passwordHash: await hashPassword(DEMO_PASSWORD) })
    .returning({ id: users.id });
  if (!row) throw new Error('insert returned no row');
  return row.id;
}

async function insertTeam(ctx: ServiceContext, name: string, kind: 'crew' | 'organiser'): Promise<string> {
  const [row] = await ctx.db.insert(teams).values({ name, kind }).returning({ id: teams.id });
  if (!row) throw new Error('insert returned no row');
  return row.id;
}
