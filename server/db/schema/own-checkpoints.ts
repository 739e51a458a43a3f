import { sql } from 'drizzle-orm';
import { check, doublePrecision, pgEnum, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id } from './columns.ts';
import { courseBooks } from './course-books.ts';
import { teams } from './teams.ts';

export const ownDuty = pgEnum('own_duty', ['settle', 'scale', 'place']);
export const roadSide = pgEnum('road_side', ['left', 'right']);
export const distanceUnit = pgEnum('distance_unit', ['km', 'mi']);

/** A team's own places over a course book, from its recce. Private to the team: never shown to another. */
export const ownCheckpoints = pgTable(
  'own_checkpoints',
  {
    id: id(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    courseBookId: uuid('course_book_id')
      .notNull()
      .references(() => courseBooks.id),
    /** Id inside the pack; journals name it, so it never changes. */
    placeId: text('place_id').notNull(),
    name: text('name').notNull(),
    duty: ownDuty('duty').notNull(),
    /** Distance as text, like a printed one: its decimals tell how finely it was measured. */
    atText: text('at_text').notNull(),
    atUnit: distanceUnit('at_unit').notNull(),
    side: roadSide('side'),
    note: text('note').notNull().default(''),
    lat: doublePrecision('lat'),
    lon: doublePrecision('lon'),
    createdAt: createdAt(),
  },
  (t) => [
    // One place, one id, in a team's layer over a book; also reads that layer for a pack.
    unique('own_checkpoints_place_key').on(t.teamId, t.courseBookId, t.placeId),
    check('own_checkpoints_at_is_distance', sql`${t.atText} ~ '^[0-9]{1,4}([.][0-9]{1,6})?$'`),
    check('own_checkpoints_position_whole', sql`(${t.lat} is null) = (${t.lon} is null)`),
  ],
);
