import { eventMembers } from '#server/db/schema/event-members.ts';
import { ownCheckpoints } from '#server/db/schema/own-checkpoints.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { createBook, publishVersion } from '#server/services/course-books/publish-course-book.ts';
import { insertCar } from '#server/services/entries/insert-car.ts';
import { insertEntry, USUAL_COCKPIT } from '#server/services/entries/insert-entry.ts';
import { insertEvent } from '#server/services/events/insert-event.ts';
import type { Checkpoint } from '#shared/course/course-book.ts';
import { CARS, type DemoCar, ORGANISER_TEAM } from './demo-cast.ts';
import { courseContent, DEMO_RULES, ownPlaces, TOURING_180, VINTAGE_150 } from './demo-course.ts';
import type { DemoPeople } from './seed-people.ts';

export interface DemoEntry {
  readonly car: DemoCar;
  readonly wheelSetupId: string;
  readonly entryId: string;
  /** Out and back yesterday, out and back tomorrow. */
  readonly attemptIds: readonly string[];
}

/** Both navigators' leads are known from earlier runs. */
const LEARNT = { tapLeadMs: { glass: 60, wired: 40 }, tapLeadSigmaMs: { glass: 60, wired: 60 }, tapScatterMs: 90 };
/** Where the seat and the aerial on the roof of a small saloon are, metres behind its nose. */
const BEHIND_NOSE = { seatM: 2.1, aerialM: 1.6 };
const DAY_MS = 24 * 3600 * 1000;

/** Two days around the day of seeding: yesterday is driven, tomorrow is next, whichever day that is. */
export async function seedEvent(ctx: ServiceContext, people: DemoPeople): Promise<readonly DemoEntry[]> {
  const today = Math.floor(ctx.now() / DAY_MS) * DAY_MS;
  const day = (offset: number): string => new Date(today + offset * DAY_MS).toISOString().slice(0, 10);
  const { eventId, raceClassIds } = await insertEvent(ctx, {
    ownerTeamId: people.organiserTeamId,
    name: 'Venholt Out and Back',
    place: 'Venholt',
    timeZone: 'UTC',
    startsOn: day(-1),
    endsOn: day(1),
    practice: false,
    rules: DEMO_RULES,
    raceClasses: [TOURING_180, VINTAGE_150],
  });
  await ctx.db
    .insert(eventMembers)
    .values(ORGANISER_TEAM.members.map(({ key, office }) => ({ eventId, userId: people.userId(key), role: office })));
  const out = await seedBook(ctx, people, eventId, 'out');
  const back = await seedBook(ctx, people, eventId, 'back');
  const demoEntries: DemoEntry[] = [];
  for (const [i, car] of CARS.entries()) {
    const start = (offset: number, hour: number, minute: number) =>
      new Date(today + offset * DAY_MS + ((hour * 60 + minute + 2 * i) * 60 + 0) * 1000);
    const ids = await insertCar(ctx, people.crewTeamId, carOf(car, new Date(today - 20 * DAY_MS), new Date(today - 9 * DAY_MS)));
    const entry = await insertEntry(ctx, {
      eventId,
      teamId: people.crewTeamId,
      ...ids,
      raceClassId: raceClassIds[0] ?? '',
      number: car.number,
      planSettings: { acceleration: 2.8, deceleration: 4.5, capMargin: 0.02 },
      cockpitSettings: { ...USUAL_COCKPIT, scaleRule: car.scaleRule, ...LEARNT },
      crew: [
        { userId: people.userId(car.driver), role: 'driver' },
        { userId: people.userId(car.navigator), role: 'navigator' },
      ],
      attempts: [
        { ...out, releaseAt: start(-1, 9, 30), stagedBehindM: 5 },
        { ...back, releaseAt: start(-1, 14, 30), stagedBehindM: 5 },
        { ...out, releaseAt: start(1, 9, 30), stagedBehindM: 5 },
        { ...back, releaseAt: start(1, 14, 30), stagedBehindM: 5 },
      ],
    });
    demoEntries.push({ car, wheelSetupId: ids.wheelSetupId, ...entry });
  }
  return demoEntries;
}

async function seedBook(ctx: ServiceContext, people: DemoPeople, eventId: string, way: 'out' | 'back') {
  const content = courseContent(way);
  const id = await createBook(ctx, { teamId: people.organiserTeamId, eventId, name: content.name });
  const { courseBook } = await publishVersion(ctx, id, people.userId('organiser'), content);
  await ctx.db.insert(ownCheckpoints).values(ownPlaces(way).map((place) => ownRow(people.crewTeamId, id, place)));
  return { courseBookId: id, courseBookVersion: courseBook.version };
}

function ownRow(teamId: string, courseBookId: string, place: Checkpoint): typeof ownCheckpoints.$inferInsert {
  const { id, name, duty, at, side, note } = place;
  if (duty !== 'settle' && duty !== 'scale' && duty !== 'place') throw new Error(`${duty} is no duty of a crew's own place`);
  return { teamId, courseBookId, placeId: id, name, duty, atText: at.text, atUnit: at.unit, side, note };
}

function carOf(car: DemoCar, bought: Date, measuredOn: Date) {
  return {
    name: car.name,
    dialReadsHighPercent: car.dialReadsHighPercent,
    behindNose: BEHIND_NOSE,
    setup: { name: 'Dry, set A', tyre: car.tyre, channel: 1, pulsesPerTurn: 24, driven: car.driven },
    scales: [
      {
        mmPerPulse: car.nominal,
        scaleSigma: 0.01,
        source: 'nominal' as const,
        note: 'From the size printed on the tyre',
        recordedAt: bought,
      },
      {
        mmPerPulse: car.measured,
        scaleSigma: 0.002,
        source: 'measured distance' as const,
        note: 'Six passes of the odometer-check stretch, tyres warm',
        recordedAt: measuredOn,
      },
    ],
  };
}
