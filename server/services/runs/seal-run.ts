import { eq } from 'drizzle-orm';
import { runs } from '#server/db/schema/runs.ts';
import { ServiceError } from '#server/service-error.ts';
import { type RunRow, requireRun } from '#server/services/access/require-run.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import type { SealRequest, SealResponse } from '#shared/api/runs.ts';

/** Closes a journal and asks for its replay. The same seal again gives the same answer, and asks again if need be. */
export async function sealRun(ctx: ServiceContext, runId: string, seal: SealRequest): Promise<SealResponse> {
  const status = await ctx.db.transaction(async (tx) => {
    const run = await requireRun(within(ctx, tx), runId, 'run.upload', true);
    requireWhole(run, seal);
    if (run.sealedAt !== null) return run.status;
    await tx
      .update(runs)
      .set({ status: 'computing', sealedAt: new Date(ctx.now()) })
      .where(eq(runs.id, runId));
    return 'computing' as const;
  });
  if (status === 'computing') await ctx.askReplay(runId);
  return { runId, head: seal.head, status };
}

function requireWhole(run: RunRow, seal: SealRequest): void {
  if (run.chunkCount === seal.count && run.head === seal.head) return;
  if (run.sealedAt === null && seal.count > run.chunkCount) {
    throw new ServiceError('SEQUENCE_GAP', `The server holds ${run.chunkCount} chunks of ${seal.count}. Send the rest, then seal.`, {
      expected: run.chunkCount,
    });
  }
  throw new ServiceError('SEAL_MISMATCH', 'The journal the server holds is not the one this seal closes. Nothing was changed.');
}
