import { jsonb, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { id, instant } from './columns.ts';
import { packs } from './packs.ts';
import { runs } from './runs.ts';

/** What one engine made of one journal. Added, never changed, so that published standings can pin the row they used. */
export const runResults = pgTable(
  'run_results',
  {
    id: id(),
    runId: uuid('run_id')
      .notNull()
      .references(() => runs.id),
    packDigest: text('pack_digest')
      .notNull()
      .references(() => packs.digest),
    engineVersion: text('engine_version').notNull(),
    journalHead: text('journal_head').notNull(),
    /** Digest of the last amendment folded in; 64 zeros for none. */
    amendmentHead: text('amendment_head').notNull(),
    sheet: jsonb('sheet').$type<RunSheet>().notNull(),
    computedAt: instant('computed_at').notNull().defaultNow(),
  },
  (t) => [
    // The key of a result: the same derivation twice is the same row. Also finds the results of a run.
    unique('run_results_key').on(t.runId, t.packDigest, t.engineVersion, t.journalHead, t.amendmentHead),
  ],
);
