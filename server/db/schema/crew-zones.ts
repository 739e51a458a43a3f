import { sql } from 'drizzle-orm';
import { check, pgEnum, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id } from './columns.ts';
import { courseBooks } from './course-books.ts';
import { distanceUnit } from './own-checkpoints.ts';
import { teams } from './teams.ts';

export const speedUnit = pgEnum('speed_unit', ['km/h', 'mph']);

/** Stretches where a crew chooses a lower highest speed than the officials ask. Private to the team. */
export const crewZones = pgTable(
  'crew_zones',
  {
    id: id(),
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    courseBookId: uuid('course_book_id')
      .notNull()
      .references(() => courseBooks.id),
    placeId: text('place_id').notNull(),
    name: text('name').notNull(),
    fromText: text('from_text').notNull(),
    toText: text('to_text').notNull(),
    unit: distanceUnit('unit').notNull(),
    limitText: text('limit_text').notNull(),
    limitUnit: speedUnit('limit_unit').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    // One zone, one id, in a team's layer over a book; also reads that layer for a pack.
    unique('crew_zones_place_key').on(t.teamId, t.courseBookId, t.placeId),
    check('crew_zones_in_order', sql`${t.toText}::numeric > ${t.fromText}::numeric`),
  ],
);
