import { index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id } from './columns.ts';
import { events } from './events.ts';
import { teams } from './teams.ts';

/** A course by name; what it says stands in its versions. */
export const courseBooks = pgTable(
  'course_books',
  {
    id: id(),
    ownerTeamId: uuid('owner_team_id')
      .notNull()
      .references(() => teams.id),
    /** The event it is driven in; every team entered there may read it. */
    eventId: uuid('event_id').references(() => events.id),
    name: text('name').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    // The books a team owns.
    index('course_books_owner_team_id_idx').on(t.ownerTeamId),
    // The books of an event.
    index('course_books_event_id_idx').on(t.eventId),
  ],
);
