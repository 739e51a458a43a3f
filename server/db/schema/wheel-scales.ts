import { sql } from 'drizzle-orm';
import { check, doublePrecision, index, pgEnum, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id, instant } from './columns.ts';
import { runs } from './runs.ts';
import { wheelSetups } from './wheel-setups.ts';

export const scaleSource = pgEnum('scale_source', ['nominal', 'measured distance', 'run']);

/** Every wheel scale a set-up ever had; the newest is in use. Rows are added, never changed. */
export const wheelScales = pgTable(
  'wheel_scales',
  {
    id: id(),
    wheelSetupId: uuid('wheel_setup_id')
      .notNull()
      .references(() => wheelSetups.id, { onDelete: 'cascade' }),
    mmPerPulse: doublePrecision('mm_per_pulse').notNull(),
    /** One standard deviation as a fraction. */
    scaleSigma: doublePrecision('scale_sigma').notNull(),
    source: scaleSource('source').notNull(),
    runId: uuid('run_id').references(() => runs.id),
    note: text('note').notNull().default(''),
    recordedAt: instant('recorded_at').notNull().defaultNow(),
    createdAt: createdAt(),
  },
  (t) => [
    // The newest scale of a set-up, read for every pack, and its history in order.
    index('wheel_scales_newest_idx').on(t.wheelSetupId, t.recordedAt.desc()),
    check('wheel_scales_positive', sql`${t.mmPerPulse} > 0 and ${t.mmPerPulse} <= 5000`),
    check('wheel_scales_sigma_range', sql`${t.scaleSigma} >= 0 and ${t.scaleSigma} <= 0.2`),
    check('wheel_scales_run_named', sql`(${t.source} = 'run') = (${t.runId} is not null)`),
  ],
);
