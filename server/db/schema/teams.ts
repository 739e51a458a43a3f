import { sql } from 'drizzle-orm';
import { check, pgEnum, pgTable, text } from 'drizzle-orm/pg-core';
import { TEAM_KINDS } from '#shared/api/auth.ts';
import { createdAt, id } from './columns.ts';

export const teamKind = pgEnum('team_kind', TEAM_KINDS);

/** Whoever owns things: a crew's team, or an organiser's. */
export const teams = pgTable(
  'teams',
  { id: id(), name: text('name').notNull(), kind: teamKind('kind').notNull().default('crew'), createdAt: createdAt() },
  (t) => [check('teams_name_not_empty', sql`length(${t.name}) between 1 and 120`)],
);
