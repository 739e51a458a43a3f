import { events } from '#server/db/schema/events.ts';
import { raceClasses } from '#server/db/schema/race-classes.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { EventRules, RaceClass } from '#shared/course/race-class.ts';

export interface NewEvent {
  readonly ownerTeamId: string;
  readonly name: string;
  readonly place: string;
  readonly timeZone: string;
  readonly startsOn: string;
  readonly endsOn: string;
  readonly practice: boolean;
  readonly rules: EventRules;
  readonly raceClasses: readonly Omit<RaceClass, 'id'>[];
}

/** An event with its classes. @returns the ids of the classes in the order given. */
export async function insertEvent(
  ctx: ServiceContext,
  event: NewEvent,
): Promise<{ readonly eventId: string; readonly raceClassIds: readonly string[] }> {
  const { raceClasses: classes, ...columns } = event;
  const [row] = await ctx.db.insert(events).values(columns).returning({ id: events.id });
  if (!row) throw new Error('insert returned no row');
  const rows = await ctx.db
    .insert(raceClasses)
    .values(
      classes.map(({ aids, sections, ...raceClass }) => ({
        eventId: row.id,
        ...raceClass,
        sections: [...sections],
        aidWheel: aids.wheel,
        aidGnssSpeed: aids.gnssSpeed,
        aidGnssPosition: aids.gnssPosition,
        aidDataLink: aids.dataLink,
      })),
    )
    .returning({ id: raceClasses.id, name: raceClasses.name });
  const idOf = new Map(rows.map(({ name, id }) => [name, id]));
  return { eventId: row.id, raceClassIds: classes.map(({ name }) => idOf.get(name) ?? '') };
}
