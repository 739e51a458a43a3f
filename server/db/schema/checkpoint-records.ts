import { sql } from 'drizzle-orm';
import { bigint, check, doublePrecision, integer, pgEnum, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { runResults } from './run-results.ts';

export const passedBy = pgEnum('passed_by', ['tap', 'distance', 'skipped', 'not reached']);

/** The passing of each checkpoint as a result tells it: rows for questions over many runs. */
export const checkpointRecords = pgTable(
  'checkpoint_records',
  {
    resultId: uuid('result_id')
      .notNull()
      .references(() => runResults.id, { onDelete: 'cascade' }),
    checkpointId: text('checkpoint_id').notNull(),
    /** Place in the course, from 0. */
    position: integer('position').notNull(),
    passedBy: passedBy('passed_by').notNull(),
    officialM: doublePrecision('official_m').notNull(),
    /** Instant on the run's session clock, microseconds. */
    atUs: bigint('at_us', { mode: 'number' }),
    elapsedS: doublePrecision('elapsed_s'),
    /** Positive = late. */
    timeErrorS: doublePrecision('time_error_s'),
    movedM: doublePrecision('moved_m'),
    scaleBefore: doublePrecision('scale_before').notNull(),
    scaleAfter: doublePrecision('scale_after').notNull(),
  },
  (t) => [primaryKey({ columns: [t.resultId, t.checkpointId] }), check('checkpoint_records_position', sql`${t.position} >= 0`)],
);
