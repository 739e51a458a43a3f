import { sql } from 'drizzle-orm';
import { check, index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { createdAt, instant } from './columns.ts';
import { users } from './users.ts';

/** A sign-in. The id is SHA-256 of the cookie's token: a stolen table signs nobody in. */
export const authSessions = pgTable(
  'auth_sessions',
  {
    id: text('id').primaryKey(),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    /** Idle limit, moved on by use. */
    expiresAt: instant('expires_at').notNull(),
    /** Absolute limit, never moved. */
    absoluteExpiresAt: instant('absolute_expires_at').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    check('auth_sessions_id_is_digest', sql`${t.id} ~ '^[0-9a-f]{64}$'`),
    // Ending every sign-in of one person.
    index('auth_sessions_user_id_idx').on(t.userId),
    // Sweeping out what has run out.
    index('auth_sessions_expires_at_idx').on(t.expiresAt),
  ],
);
