import { requireRun } from '#server/services/access/require-run.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { HeldResponse } from '#shared/api/runs.ts';
import { heldOf } from './held.ts';

/** Where an upload is to go on. */
export async function heldChunks(ctx: ServiceContext, runId: string): Promise<HeldResponse> {
  return heldOf(await requireRun(ctx, runId, 'run.upload'));
}
