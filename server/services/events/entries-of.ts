import { and, asc, eq, inArray, or } from 'drizzle-orm';
import { teamRoleMay } from '#server/auth/permissions.ts';
import { cars } from '#server/db/schema/cars.ts';
import { entries } from '#server/db/schema/entries.ts';
import { entryCrew } from '#server/db/schema/entry-crew.ts';
import { events } from '#server/db/schema/events.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import type { TeamAccess } from '#server/services/access/require-team.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { cockpitSettingsOf } from '#server/services/entries/set-cockpit-settings.ts';
import { attemptsOf } from './attempts-of.ts';
import type { BookSummary } from './book-summaries.ts';

export type EntryView = Awaited<ReturnType<typeof entriesOf>>[number];

/**
 * The team's own entries in these events, and every entry of the events it owns. Of another team's entry only what stands
 * on the start list: its packs, own places and runs stay its own.
 */
export async function entriesOf(ctx: ServiceContext, access: TeamAccess, eventIds: readonly string[], books: readonly BookSummary[]) {
  if (eventIds.length === 0) return [];
  const teamId = access.team.id;
  const rows = await ctx.db
    .select({
      entry: entries,
      team: { id: teams.id, name: teams.name },
      car: { id: cars.id, name: cars.name, wheelSetup: wheelSetups.name },
    })
    .from(entries)
    .innerJoin(events, eq(events.id, entries.eventId))
    .innerJoin(teams, eq(teams.id, entries.teamId))
    .innerJoin(cars, eq(cars.id, entries.carId))
    .innerJoin(wheelSetups, eq(wheelSetups.id, entries.wheelSetupId))
    .where(and(inArray(entries.eventId, [...eventIds]), or(eq(entries.teamId, teamId), eq(events.ownerTeamId, teamId))))
    .orderBy(asc(entries.number));
  const crew = await crewOf(
    ctx,
    rows.map((row) => row.entry.id),
  );
  const mayPrepare = teamRoleMay(access.role, 'pack.load');
  return Promise.all(
    rows.map(async ({ entry, team, car }) => {
      const own = entry.teamId === teamId;
      return {
        id: entry.id,
        eventId: entry.eventId,
        number: entry.number,
        team,
        car,
        crew: crew.filter((member) => member.entryId === entry.id).map(({ name, role }) => ({ name, role })),
        raceClassId: entry.raceClassId,
        mayPrepare: own && mayPrepare,
        settings: own ? cockpitSettingsOf(entry) : null,
        attempts: await attemptsOf(ctx, entry.id, own, books),
      };
    }),
  );
}

async function crewOf(ctx: ServiceContext, entryIds: string[]) {
  if (entryIds.length === 0) return [];
  return ctx.db
    .select({ entryId: entryCrew.entryId, name: users.name, role: entryCrew.role })
    .from(entryCrew)
    .innerJoin(users, eq(users.id, entryCrew.userId))
    .where(inArray(entryCrew.entryId, entryIds))
    .orderBy(asc(entryCrew.role), asc(users.name));
}
