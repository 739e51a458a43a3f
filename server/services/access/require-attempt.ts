import { eq } from 'drizzle-orm';
import type { Action } from '#server/auth/permissions.ts';
import { attempts } from '#server/db/schema/attempts.ts';
import { ServiceError } from '#server/service-error.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { requireEntry } from './require-entry.ts';

export type AttemptRow = typeof attempts.$inferSelect;

/** An attempt, if the caller may do `action` on its entry. */
export async function requireAttempt(ctx: ServiceContext, attemptId: string, action: Action): Promise<AttemptRow> {
  if (ctx.actor.kind === 'anonymous') throw new ServiceError('SIGN_IN_REQUIRED', 'Sign in first.');
  const [attempt] = await ctx.db.select().from(attempts).where(eq(attempts.id, attemptId));
  if (!attempt) throw new ServiceError('NOT_FOUND', 'There is no such attempt, or it is not your team’s.');
  await requireEntry(ctx, attempt.entryId, action);
  return attempt;
}
