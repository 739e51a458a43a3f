import { index, pgEnum, pgTable, primaryKey, uuid } from 'drizzle-orm/pg-core';
import { MEMBER_ROLES } from '#shared/api/auth.ts';
import { createdAt } from './columns.ts';
import { teams } from './teams.ts';
import { users } from './users.ts';

export const memberRole = pgEnum('member_role', MEMBER_ROLES);

/** Who belongs to which team, and as what. What a role may do stands in the permission table. */
export const memberships = pgTable(
  'memberships',
  {
    teamId: uuid('team_id')
      .notNull()
      .references(() => teams.id, { onDelete: 'cascade' }),
    userId: uuid('user_id')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    role: memberRole('role').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    primaryKey({ columns: [t.teamId, t.userId] }),
    // The teams of one person, read at every sign-in; the primary key leads with the team.
    index('memberships_user_id_idx').on(t.userId),
  ],
);
