import { sql } from 'drizzle-orm';
import {
  bigint,
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  pgEnum,
  pgTable,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { attempts } from './attempts.ts';
import { instant } from './columns.ts';
import { packs } from './packs.ts';

export const runStatus = pgEnum('run_status', ['receiving', 'computing', 'ready', 'failed']);

/** A run of (entry, attempt, device): its header and how much of its journal is held. */
export const runs = pgTable(
  'runs',
  {
    /** UUIDv7, made on the device. */
    id: uuid('id').primaryKey(),
    entryId: uuid('entry_id').notNull(),
    attemptId: uuid('attempt_id').notNull(),
    deviceId: text('device_id').notNull(),
    packDigest: text('pack_digest')
      .notNull()
      .references(() => packs.digest),
    clockRate: doublePrecision('clock_rate').notNull(),
    practice: boolean('practice').notNull(),
    /** The device's wall clock when the run was made. */
    madeAt: instant('made_at').notNull(),
    appVersion: text('app_version').notNull(),
    /** SHA-256 of the header's canonical JSON: tells the same header sent again from another. */
    headerDigest: text('header_digest').notNull(),
    chunkCount: integer('chunk_count').notNull().default(0),
    /** Digest of the last chunk held. */
    head: text('head').notNull().default(ZERO_DIGEST),
    /** Seq of the observation that comes next. */
    nextSeq: bigint('next_seq', { mode: 'number' }).notNull().default(0),
    status: runStatus('status').notNull().default('receiving'),
    sealedAt: instant('sealed_at'),
    failureMessage: text('failure_message'),
    failureAt: instant('failure_at'),
    receivedAt: instant('received_at').notNull().defaultNow(),
  },
  (t) => [
    foreignKey({
      name: 'runs_attempt_of_entry',
      columns: [t.attemptId, t.entryId],
      foreignColumns: [attempts.id, attempts.entryId],
    }),
    // The runs of an attempt; also what the attempt's counting run must be one of.
    unique('runs_attempt_id_id_key').on(t.attemptId, t.id),
    // The runs of an entry, newest first, on the team's list.
    index('runs_entry_id_made_at_idx').on(t.entryId, t.madeAt.desc()),
    // Sealed runs still to be replayed, looked for at every start; few at any time.
    index('runs_computing_idx').on(t.sealedAt).where(sql`${t.status} = 'computing'`),
    check('runs_clock_rate', sql`${t.clockRate} > 0`),
    check('runs_sealed_when_done', sql`(${t.sealedAt} is null) = (${t.status} = 'receiving')`),
    check('runs_failure_told', sql`(${t.status} = 'failed') = (${t.failureMessage} is not null)`),
    check('runs_head_starts_at_zero', sql`(${t.chunkCount} = 0) = (${t.head} = repeat('0', 64))`),
    check('runs_digests', sql`${t.head} ~ '^[0-9a-f]{64}$' and ${t.headerDigest} ~ '^[0-9a-f]{64}$'`),
  ],
);
