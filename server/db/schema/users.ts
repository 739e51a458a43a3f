import { sql } from 'drizzle-orm';
import { check, pgTable, text, unique } from 'drizzle-orm/pg-core';
import { createdAt, id } from './columns.ts';

/** People who sign in. The address is stored in lower case, so that one person cannot become two. */
export const users = pgTable(
  'users',
  {
    id: id(),
    email: text('email').notNull(),
    name: text('name').notNull(),
    /** argon2id, parameters inside. */
    passwordHash: text('password_hash').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    // Sign-in looks people up by address, and an address belongs to one person.
    unique('users_email_key').on(t.email),
    check('users_email_lower_case', sql`${t.email} = lower(${t.email})`),
    check('users_name_not_empty', sql`length(${t.name}) between 1 and 120`),
  ],
);
