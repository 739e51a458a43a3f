import { sql } from 'drizzle-orm';
import { check, index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { attempts } from './attempts.ts';
import { createdAt } from './columns.ts';

/** Packs as handed out, byte for byte. Never change; a trigger (see the migrations) refuses it. */
export const packs = pgTable(
  'packs',
  {
    /** SHA-256 of the canonical JSON, hex. */
    digest: text('digest').primaryKey(),
    attemptId: uuid('attempt_id')
      .notNull()
      .references(() => attempts.id),
    canonical: text('canonical').notNull(),
    createdAt: createdAt(),
  },
  (t) => [
    check('packs_digest_of_canonical', sql`${t.digest} = encode(sha256(convert_to(${t.canonical}, 'UTF8')), 'hex')`),
    // The packs handed out for one attempt.
    index('packs_attempt_id_idx').on(t.attemptId),
  ],
);
