import { sql } from 'drizzle-orm';
import { boolean, check, date, index, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { EventRules } from '#shared/course/race-class.ts';
import { createdAt, id } from './columns.ts';
import { teams } from './teams.ts';

/** Owned by a team or an organiser. The rules are data; `eventRulesSchema` says their shape. */
export const events = pgTable(
  'events',
  {
    id: id(),
    ownerTeamId: uuid('owner_team_id')
      .notNull()
      .references(() => teams.id),
    name: text('name').notNull(),
    place: text('place').notNull(),
    /** IANA zone: every clock time of the event is read in it. */
    timeZone: text('time_zone').notNull(),
    startsOn: date('starts_on', { mode: 'string' }).notNull(),
    endsOn: date('ends_on', { mode: 'string' }).notNull(),
    practice: boolean('practice').notNull().default(false),
    rules: jsonb('rules').$type<EventRules>().notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    check('events_days_in_order', sql`${t.endsOn} >= ${t.startsOn}`),
    // The events a team owns.
    index('events_owner_team_id_idx').on(t.ownerTeamId),
    // A team practises in one event of its own: a repeated request makes no second.
    uniqueIndex('events_one_practice_per_team').on(t.ownerTeamId).where(sql`${t.practice}`),
  ],
);
