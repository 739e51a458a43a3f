import { index, pgEnum, pgTable, primaryKey, uuid } from 'drizzle-orm/pg-core';
import { createdAt } from './columns.ts';
import { events } from './events.ts';
import { users } from './users.ts';

export const EVENT_ROLES = ['organiser', 'timekeeper', 'scrutineer', 'marshal'] as const;
export type EventRole = (typeof EVENT_ROLES)[number];
export const eventRole = pgEnum('event_role', EVENT_ROLES);

/** Who does what at an event. One person may hold several offices. */
export const eventMembers = pgTable(
  'event_members',
  {
    eventId: uuid('event_id')
      .notNull()
      .references(() => events.id, { onDelete: 'cascade' }),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    role: eventRole('role').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.eventId, t.userId, t.role] }),
    // The offices of one person; the primary key leads with the event.
    index('event_members_user_id_idx').on(t.userId),
  ],
);
