import type { RunRow } from '#server/services/access/require-run.ts';
import type { HeldResponse } from '#shared/api/runs.ts';

export const heldOf = (run: RunRow): HeldResponse => ({
  runId: run.id,
  count: run.chunkCount,
  head: run.head,
  sealed: run.sealedAt !== null,
});
