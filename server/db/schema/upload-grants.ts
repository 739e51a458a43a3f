import { sql } from 'drizzle-orm';
import { check, index, pgTable, text, unique, uuid } from 'drizzle-orm/pg-core';
import { createdAt, id, instant } from './columns.ts';
import { entries } from './entries.ts';
import { users } from './users.ts';

/** Leave to append runs of one entry, handed out with a pack. The token is stored as its SHA-256 only. */
export const uploadGrants = pgTable(
  'upload_grants',
  {
    id: id(),
    tokenHash: text('token_hash').notNull(),
    entryId: uuid('entry_id')
      .notNull()
      .references(() => entries.id, { onDelete: 'cascade' }),
    issuedTo: uuid('issued_to')
      .notNull()
      .references(() => users.id, { onDelete: 'cascade' }),
    expiresAt: instant('expires_at').notNull(),
    revokedAt: instant('revoked_at'),
    createdAt: createdAt(),
  },
  (t) => [
    // Every upload with a grant looks it up by its hash.
    unique('upload_grants_token_hash_key').on(t.tokenHash),
    // Revoking the grants of one entry.
    index('upload_grants_entry_id_idx').on(t.entryId),
    check('upload_grants_hash_is_digest', sql`${t.tokenHash} ~ '^[0-9a-f]{64}$'`),
  ],
);
