import { eq } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { requireAttempt } from '#server/services/access/require-attempt.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { SetReleaseRequest, SetReleaseResponse } from '#shared/api/attempts.ts';

export async function setRelease(ctx: ServiceContext, attemptId: string, { releaseMs }: SetReleaseRequest): Promise<SetReleaseResponse> {
  await requireAttempt(ctx, attemptId, 'release.set');
  await ctx.db
    .update(attempts)
    .set({ releaseAt: releaseMs === null ? null : new Date(releaseMs) })
    .where(eq(attempts.id, attemptId));
  return { id: attemptId, releaseMs };
}
