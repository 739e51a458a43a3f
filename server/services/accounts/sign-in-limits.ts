import { and, asc, eq, gt, lt, sql } from 'drizzle-orm';
import { sha256Hex } from '#server/auth/tokens.ts';
import { signInFailures } from '#server/db/schema/sign-in-failures.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceDeps } from '#server/services/context.ts';

/**
 * Failures only are limited, and by account together with address: a whole paddock sits behind one address, and nobody can
 * lock a stranger out. Five in a quarter of an hour for one account, three hundred in an hour for one address.
 */
const ACCOUNT = { failures: 5, windowMs: 15 * 60_000 };
const ADDRESS = { failures: 300, windowMs: 60 * 60_000 };

export interface Attempt {
  readonly accountKey: string;
  readonly address: string;
}

export const attemptOf = (email: string, address: string): Attempt => ({ accountKey: sha256Hex(email), address });

/**
 * Counts a failure before the password is looked at, so that tries made at once cannot all slip under the limit;
 * `forgive` takes it back. @throws ServiceError TOO_MANY_ATTEMPTS, counting nothing.
 */
export async function countAsFailed(deps: ServiceDeps, attempt: Attempt): Promise<void> {
  const now = deps.now();
  await deps.db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(hashtextextended(${attempt.address}, 0))`);
    const since = (windowMs: number) =>
      and(eq(signInFailures.address, attempt.address), gt(signInFailures.failedAt, new Date(now - windowMs)));
    const limits = [
      { ...ADDRESS, where: since(ADDRESS.windowMs) },
      { ...ACCOUNT, where: and(since(ACCOUNT.windowMs), eq(signInFailures.accountKey, attempt.accountKey)) },
    ];
    for (const { failures, windowMs, where } of limits) {
      const rows = await tx.select({ at: signInFailures.failedAt }).from(signInFailures).where(where).orderBy(asc(signInFailures.failedAt));
      const oldestThatCounts = rows.at(-failures);
      if (oldestThatCounts) throw tooMany(oldestThatCounts.at.getTime() + windowMs - now);
    }
    await tx
      .delete(signInFailures)
      .where(and(eq(signInFailures.address, attempt.address), lt(signInFailures.failedAt, new Date(now - ADDRESS.windowMs))));
    await tx.insert(signInFailures).values({ ...attempt, failedAt: new Date(now) });
  });
}

/** The password was right: this account starts afresh from this address. */
export async function forgive(deps: ServiceDeps, attempt: Attempt): Promise<void> {
  await deps.db
    .delete(signInFailures)
    .where(and(eq(signInFailures.accountKey, attempt.accountKey), eq(signInFailures.address, attempt.address)));
}

function tooMany(waitMs: number): ServiceError {
  const retryAfterS = Math.max(1, Math.ceil(waitMs / 1000));
  const minutes = Math.ceil(retryAfterS / 60);
  return new ServiceError('TOO_MANY_ATTEMPTS', `Too many failed sign-ins. Wait ${minutes} minutes, then try again.`, { retryAfterS });
}
