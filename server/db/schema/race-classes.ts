import { sql } from 'drizzle-orm';
import { boolean, check, integer, jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import type { PrintedSpeed } from '#shared/course/course-book.ts';
import type { Section } from '#shared/course/race-class.ts';
import { createdAt, id } from './columns.ts';
import { events } from './events.ts';

export const raceClasses = pgTable(
  'race_classes',
  {
    id: id(),
    eventId: uuid('event_id')
      .notNull()
      .references(() => events.id, { onDelete: 'cascade' }),
    name: text('name').notNull(),
    /** The official target time decides; length over average only checks it. */
    targetTimeMs: integer('target_time_ms').notNull(),
    sections: jsonb('sections').$type<Section[]>().notNull(),
    cap: jsonb('cap').$type<PrintedSpeed>(),
    floor: jsonb('floor').$type<PrintedSpeed>(),
    aidWheel: boolean('aid_wheel').notNull(),
    aidGnssSpeed: boolean('aid_gnss_speed').notNull(),
    aidGnssPosition: boolean('aid_gnss_position').notNull(),
    aidDataLink: boolean('aid_data_link').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    // Classes of an event are told apart by name; also lists them.
    unique('race_classes_event_id_name_key').on(t.eventId, t.name),
    // Lets an entry's foreign key demand a class of its own event.
    unique('race_classes_id_event_id_key').on(t.id, t.eventId),
    check('race_classes_target_time', sql`${t.targetTimeMs} between 1 and 86400000`),
    check('race_classes_has_sections', sql`jsonb_array_length(${t.sections}) >= 1`),
  ],
);
