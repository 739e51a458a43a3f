import { and, eq } from 'drizzle-orm';
import { countingRuns } from '#server/db/schema/counting-runs.ts';
import { runs } from '#server/db/schema/runs.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireEntry } from '#server/services/access/require-entry.ts';
import { requireUser } from '#server/services/access/require-user.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { SetCountingRunResponse } from '#shared/api/entries.ts';

/** Of several runs of one attempt, names the one that counts. Practice never counts. */
export async function setCountingRun(ctx: ServiceContext, entryId: string, runId: string): Promise<SetCountingRunResponse> {
  const userId = requireUser(ctx);
  await requireEntry(ctx, entryId, 'counting-run.set');
  const [run] = await ctx.db
    .select({ attemptId: runs.attemptId, practice: runs.practice, clockRate: runs.clockRate, sealedAt: runs.sealedAt })
    .from(runs)
    .where(and(eq(runs.id, runId), eq(runs.entryId, entryId)));
  if (!run) throw new ServiceError('RUN_NOT_FOUND', 'This entry has no such run.');
  if (run.practice || run.clockRate !== 1) {
    throw new ServiceError('RUN_IS_PRACTICE', 'A practice run never counts. Choose a run that was driven.');
  }
  if (run.sealedAt === null) {
    throw new ServiceError('RUN_NOT_SEALED', 'This run has not reached the server whole yet. Let its tablet finish sending first.');
  }
  const choice = { runId, chosenBy: userId, chosenAt: new Date(ctx.now()) };
  await ctx.db
    .insert(countingRuns)
    .values({ attemptId: run.attemptId, ...choice })
    .onConflictDoUpdate({ target: countingRuns.attemptId, set: choice });
  return { attemptId: run.attemptId, countingRunId: runId };
}
