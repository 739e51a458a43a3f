import { foreignKey, index, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import type { CockpitSettings, PlanSettings } from '#shared/course/pack.ts';
import { cars } from './cars.ts';
import { createdAt, id } from './columns.ts';
import { events } from './events.ts';
import { raceClasses } from './race-classes.ts';
import { teams } from './teams.ts';
import { wheelSetups } from './wheel-setups.ts';

/** A car with its crew, entered in a class of an event. */
export const entries = pgTable(
  'entries',
  {
    id: id(),
    eventId: uuid('event_id')
      .notNull()
      .references(() => events.id),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id),
    carId: uuid('car_id').notNull(),
    wheelSetupId: uuid('wheel_setup_id').notNull(),
    raceClassId: uuid('race_class_id').notNull(),
    number: text('number').notNull(),
    /** What the pace plan assumes of car and driver; `packSchema` says the shape of both. */
    planSettings: jsonb('plan_settings').$type<PlanSettings>().notNull(),
    cockpitSettings: jsonb('cockpit_settings').$type<CockpitSettings>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    // A number is worn by one car of an event; also lists an event's entries.
    unique('entries_event_id_number_key').on(t.eventId, t.number),
    // Lets a crew's foreign key demand members of the entry's team.
    unique('entries_id_team_id_key').on(t.id, t.teamId),
    // The entries of a team, on its event page.
    index('entries_team_id_idx').on(t.teamId),
    foreignKey({ name: 'entries_own_car', columns: [t.carId, t.teamId], foreignColumns: [cars.id, cars.teamId] }),
    foreignKey({
      name: 'entries_wheels_of_car',
      columns: [t.wheelSetupId, t.carId],
      foreignColumns: [wheelSetups.id, wheelSetups.carId],
    }),
    foreignKey({
      name: 'entries_class_of_event',
      columns: [t.raceClassId, t.eventId],
      foreignColumns: [raceClasses.id, raceClasses.eventId],
    }),
  ],
);
