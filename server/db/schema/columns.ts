import { timestamp, uuid } from 'drizzle-orm/pg-core';

/** Column shapes used by every table. Instants keep whole milliseconds, as the rest of the house does. */
export const id = () => uuid('id').primaryKey().defaultRandom();
export const instant = (name: string) => timestamp(name, { withTimezone: true, precision: 3, mode: 'date' });
export const createdAt = () => instant('created_at').notNull().defaultNow();
