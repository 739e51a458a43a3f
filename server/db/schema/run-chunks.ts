import { sql } from 'drizzle-orm';
import { bigint, check, customType, integer, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns.ts';
import { runs } from './runs.ts';

const bytea = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' });

/** Chunks of a journal, byte for byte as they came. Stored uncompressed and out of line (see the migrations). */
export const runChunks = pgTable(
  'run_chunks',
  {
    runId: uuid('run_id')
      .notNull()
      .references(() => runs.id),
    n: integer('n').notNull(),
    bytes: bytea('bytes').notNull(),
    /** SHA-256(previous digest ‖ bytes), hex. */
    digest: text('digest').notNull(),
    firstSeq: bigint('first_seq', { mode: 'number' }).notNull(),
    count: integer('count').notNull(),
    receivedAt: instant('received_at').notNull().defaultNow(),
  },
  (t) => [
    primaryKey({ columns: [t.runId, t.n] }),
    check('run_chunks_n', sql`${t.n} >= 0`),
    check('run_chunks_not_empty', sql`${t.count} >= 1 and length(${t.bytes}) >= 1`),
    check('run_chunks_digest', sql`${t.digest} ~ '^[0-9a-f]{64}$'`),
  ],
);
