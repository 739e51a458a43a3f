import { and, asc, desc, eq } from 'drizzle-orm';
import { cars } from '#server/db/schema/cars.ts';
import { courseBookVersions } from '#server/db/schema/course-book-versions.ts';
import { crewZones } from '#server/db/schema/crew-zones.ts';
import { entries } from '#server/db/schema/entries.ts';
import { entryCrew } from '#server/db/schema/entry-crew.ts';
import { events } from '#server/db/schema/events.ts';
import { ownCheckpoints } from '#server/db/schema/own-checkpoints.ts';
import { raceClasses } from '#server/db/schema/race-classes.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import { wheelScales } from '#server/db/schema/wheel-scales.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import type { AttemptRow } from '#server/services/access/require-attempt.ts';
import type { ServiceContext } from '#server/services/context.ts';

export type PackRows = Awaited<ReturnType<typeof readPackRows>>;

/** Every row that goes into the pack of an attempt. The caller has been let through already. */
export async function readPackRows(ctx: ServiceContext, attempt: AttemptRow) {
  const entry = await readEntry(ctx, attempt.entryId);
  const [book] = await ctx.db
    .select({ body: courseBookVersions.body })
    .from(courseBookVersions)
    .where(and(eq(courseBookVersions.courseBookId, attempt.courseBookId), eq(courseBookVersions.version, attempt.courseBookVersion)));
  if (!book) throw new Error('an attempt without its course book');
  const [scale] = await ctx.db
    .select()
    .from(wheelScales)
    .where(eq(wheelScales.wheelSetupId, entry.setup.id))
    .orderBy(desc(wheelScales.recordedAt), desc(wheelScales.id))
    .limit(1);
  const crew = await ctx.db
    .select({ name: users.name, role: entryCrew.role })
    .from(entryCrew)
    .innerJoin(users, eq(users.id, entryCrew.userId))
    .where(eq(entryCrew.entryId, attempt.entryId))
    .orderBy(asc(entryCrew.role), asc(users.name));
  const places = await ctx.db
    .select()
    .from(ownCheckpoints)
    .where(and(eq(ownCheckpoints.teamId, entry.team.id), eq(ownCheckpoints.courseBookId, attempt.courseBookId)))
    .orderBy(asc(ownCheckpoints.placeId));
  const zones = await ctx.db
    .select()
    .from(crewZones)
    .where(and(eq(crewZones.teamId, entry.team.id), eq(crewZones.courseBookId, attempt.courseBookId)))
    .orderBy(asc(crewZones.placeId));
  return { ...entry, attempt, courseBook: book.body, scale: scale ?? null, crew, places, zones };
}

async function readEntry(ctx: ServiceContext, entryId: string) {
  const [row] = await ctx.db
    .select({ entry: entries, event: events, team: teams, car: cars, setup: wheelSetups, raceClass: raceClasses })
    .from(entries)
    .innerJoin(events, eq(events.id, entries.eventId))
    .innerJoin(teams, eq(teams.id, entries.teamId))
    .innerJoin(cars, eq(cars.id, entries.carId))
    .innerJoin(wheelSetups, eq(wheelSetups.id, entries.wheelSetupId))
    .innerJoin(raceClasses, eq(raceClasses.id, entries.raceClassId))
    .where(eq(entries.id, entryId));
  if (!row) throw new Error('an attempt without its entry');
  return row;
}
