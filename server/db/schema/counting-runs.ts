import { foreignKey, pgTable, uuid } from 'drizzle-orm/pg-core';
import { attempts } from './attempts.ts';
import { instant } from './columns.ts';
import { runs } from './runs.ts';
import { users } from './users.ts';

/** Of several runs of one attempt, the one that counts: none or one an attempt. */
export const countingRuns = pgTable(
  'counting_runs',
  {
    attemptId: uuid('attempt_id')
      .primaryKey()
      .references(() => attempts.id, { onDelete: 'cascade' }),
    runId: uuid('run_id').notNull(),
    chosenBy: uuid('chosen_by').references(() => users.id, { onDelete: 'set null' }),
    chosenAt: instant('chosen_at').notNull().defaultNow(),
  },
  (t) => [
    // The run that counts is a run of this very attempt.
    foreignKey({ name: 'counting_runs_of_attempt', columns: [t.attemptId, t.runId], foreignColumns: [runs.attemptId, runs.id] }),
  ],
);
