import { asc, eq } from 'drizzle-orm';
import { violatedUnique } from '#server/db/connect.ts';
import { cars } from '#server/db/schema/cars.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireTeam, type TeamAccess } from '#server/services/access/require-team.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import { createBook, publishVersion } from '#server/services/course-books/publish-course-book.ts';
import { insertCar } from '#server/services/entries/insert-car.ts';
import { insertEntry, USUAL_COCKPIT, USUAL_PLAN } from '#server/services/entries/insert-entry.ts';
import { insertEvent } from '#server/services/events/insert-event.ts';
import type { PracticeEventResponse } from '#shared/api/events.ts';
import { PRACTICE_CLASS, PRACTICE_COURSE, PRACTICE_RULES } from './practice-course.ts';

/** Something to drive at once, for a team with nothing yet: an invented course, a class, a car, an entry, an attempt. */
export async function createPracticeEvent(ctx: ServiceContext, teamId: string): Promise<PracticeEventResponse> {
  const access = await requireTeam(ctx, teamId, 'practice-event.create');
  try {
    return await ctx.db.transaction((tx) => create(within(ctx, tx), access));
  } catch (error) {
    if (violatedUnique(error) !== 'events_one_practice_per_team') throw error;
    throw new ServiceError('PRACTICE_EVENT_EXISTS', 'Your team has its practice event already. Find it among the events.');
  }
}

async function create(ctx: ServiceContext, { team, userId }: TeamAccess): Promise<PracticeEventResponse> {
  const today = new Date(ctx.now()).toISOString().slice(0, 10);
  const { eventId, raceClassIds } = await insertEvent(ctx, {
    ownerTeamId: team.id,
    name: 'Practice',
    place: 'Anywhere',
    timeZone: 'UTC',
    startsOn: today,
    endsOn: today,
    practice: true,
    rules: PRACTICE_RULES,
    raceClasses: [PRACTICE_CLASS],
  });
  const bookId = await createBook(ctx, { teamId: team.id, eventId, name: PRACTICE_COURSE.name });
  const { courseBook } = await publishVersion(ctx, bookId, userId, PRACTICE_COURSE);
  const { entryId, attemptIds } = await insertEntry(ctx, {
    eventId,
    teamId: team.id,
    ...(await carFor(ctx, team.id)),
    raceClassId: raceClassIds[0] ?? '',
    number: '1',
    planSettings: USUAL_PLAN,
    cockpitSettings: USUAL_COCKPIT,
    crew: [{ userId, role: 'navigator' }],
    attempts: [{ courseBookId: courseBook.id, courseBookVersion: courseBook.version, releaseAt: null, stagedBehindM: 5 }],
  });
  return { eventId, entryId, attemptId: attemptIds[0] ?? '' };
}

/** The team's first car, or one made for the purpose. */
async function carFor(ctx: ServiceContext, teamId: string): Promise<{ readonly carId: string; readonly wheelSetupId: string }> {
  const [present] = await ctx.db
    .select({ carId: cars.id, wheelSetupId: wheelSetups.id })
    .from(cars)
    .innerJoin(wheelSetups, eq(wheelSetups.carId, cars.id))
    .where(eq(cars.teamId, teamId))
    .orderBy(asc(cars.createdAt), asc(wheelSetups.createdAt))
    .limit(1);
  if (present) return present;
  return insertCar(ctx, teamId, {
    name: 'Practice car',
    dialReadsHighPercent: 3,
    setup: { name: 'Road tyres', tyre: '225/45 R17', channel: 1, pulsesPerTurn: 24 },
    scales: [
      { mmPerPulse: 82.6, scaleSigma: 0.01, source: 'nominal', note: 'From the size printed on the tyre', recordedAt: new Date(ctx.now()) },
    ],
  });
}
