import { foreignKey, index, pgTable, primaryKey, unique, uuid } from 'drizzle-orm/pg-core';
import { entries } from './entries.ts';
import { memberRole, memberships } from './memberships.ts';

/** Who sits in the car of an entry, or looks after it. Only members of the entry's team. */
export const entryCrew = pgTable(
  'entry_crew',
  {
    entryId: uuid('entry_id').notNull(),
    teamId: uuid('team_id').notNull(),
    userId: uuid('user_id').notNull(),
    role: memberRole('role').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.entryId, t.userId] }),
    // One driver and one navigator an entry.
    unique('entry_crew_seat_key').on(t.entryId, t.role),
    // The entries of one member.
    index('entry_crew_member_idx').on(t.teamId, t.userId),
    foreignKey({
      name: 'entry_crew_entry',
      columns: [t.entryId, t.teamId],
      foreignColumns: [entries.id, entries.teamId],
    }).onDelete('cascade'),
    foreignKey({
      name: 'entry_crew_member',
      columns: [t.teamId, t.userId],
      foreignColumns: [memberships.teamId, memberships.userId],
    }),
  ],
);
