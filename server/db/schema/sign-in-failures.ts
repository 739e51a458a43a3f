import { bigserial, index, pgTable, text } from 'drizzle-orm/pg-core';
import { instant } from './columns.ts';

/** Failed sign-ins of the last hour, counted here so that several processes and a restart count alike. */
export const signInFailures = pgTable(
  'sign_in_failures',
  {
    id: bigserial('id', { mode: 'number' }).primaryKey(),
    /** SHA-256 of the address typed, known or not: the table lists no people. */
    accountKey: text('account_key').notNull(),
    address: text('address').notNull(),
    failedAt: instant('failed_at').notNull(),
  },
  (t) => [
    // The limit of one account from one address.
    index('sign_in_failures_account_idx').on(t.accountKey, t.address, t.failedAt),
    // The limit of one address over all accounts.
    index('sign_in_failures_address_idx').on(t.address, t.failedAt),
  ],
);
