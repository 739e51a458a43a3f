import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { ANONYMOUS } from '#server/auth/actor.ts';
import { connect } from '#server/db/connect.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { users } from '#server/db/schema/users.ts';
import { serviceDeps } from '#server/service-deps.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { createBook, publishVersion } from '#server/services/course-books/publish-course-book.ts';
import { insertCar } from '#server/services/entries/insert-car.ts';
import { insertEntry } from '#server/services/entries/insert-entry.ts';
import { insertEvent } from '#server/services/events/insert-event.ts';
import type { Pack } from '#shared/course/pack.ts';

/**
 * Puts the course, class, car and entry of a pack into the demo team, through the services that do so for people, and gives
 * the attempt's id: the pack that the tablet then stores comes from the server like any other.
 */
export async function stageEvent(databaseUrl: string, email: string, pack: Pack): Promise<{ readonly attemptId: string }> {
  const connection = connect(databaseUrl, { max: 2, patient: true });
  try {
    const deps = serviceDeps(connection, async () => undefined, Date.now);
    const ctx: ServiceContext = { ...deps, actor: ANONYMOUS };
    const [member] = await ctx.db
      .select({ userId: users.id, teamId: memberships.teamId })
      .from(users)
      .innerJoin(memberships, eq(memberships.userId, users.id))
      .where(eq(users.email, email));
    if (member === undefined) throw new Error(`nobody has the address ${email}`);
    return await ctx.db.transaction((tx) => insertAll({ ...ctx, db: tx }, member, pack));
  } finally {
    await connection.close();
  }
}

async function insertAll(ctx: ServiceContext, { userId, teamId }: { userId: string; teamId: string }, pack: Pack) {
  const day = new Date(pack.attempt.releaseMs ?? ctx.now()).toISOString().slice(0, 10);
  const { id: _class, ...raceClass } = pack.raceClass;
  const { eventId, raceClassIds } = await insertEvent(ctx, {
    ownerTeamId: teamId,
    name: pack.event.name,
    place: pack.event.place,
    timeZone: pack.event.timeZone,
    startsOn: day,
    endsOn: day,
    practice: false,
    rules: pack.event.rules,
    raceClasses: [raceClass],
  });
  const { id: _book, version: _version, ...content } = pack.courseBook;
  const bookId = await createBook(ctx, { teamId, eventId, name: content.name });
  const { courseBook } = await publishVersion(ctx, bookId, userId, content);
  const { wheel } = pack;
  const car = await insertCar(ctx, teamId, {
    name: `${pack.car.name} ${randomUUID().slice(0, 8)}`,
    dialReadsHighPercent: pack.car.dialReadsHighPercent,
    setup: { name: wheel.setupName, tyre: '', channel: wheel.channel, pulsesPerTurn: wheel.pulsesPerTurn },
    scales: [{ mmPerPulse: wheel.mmPerPulse, scaleSigma: wheel.scaleSigma, source: 'nominal', note: '', recordedAt: new Date(ctx.now()) }],
  });
  const { attemptIds } = await insertEntry(ctx, {
    eventId,
    teamId,
    ...car,
    raceClassId: raceClassIds[0] ?? '',
    number: pack.entry.number,
    planSettings: pack.plan,
    cockpitSettings: pack.settings,
    crew: [{ userId, role: 'navigator' }],
    attempts: [
      {
        courseBookId: courseBook.id,
        courseBookVersion: courseBook.version,
        releaseAt: pack.attempt.releaseMs === null ? null : new Date(pack.attempt.releaseMs),
        stagedBehindM: pack.attempt.stagedBehindM,
      },
    ],
  });
  return { attemptId: attemptIds[0] ?? '' };
}
