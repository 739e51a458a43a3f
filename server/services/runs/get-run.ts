import { and, desc, eq } from 'drizzle-orm';
import { packs } from '#server/db/schema/packs.ts';
import { runResults } from '#server/db/schema/run-results.ts';
import { runs } from '#server/db/schema/runs.ts';
import { requireRun } from '#server/services/access/require-run.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import { packSchema } from '#shared/api/pack.ts';
import { runSheetSchema } from '#shared/api/run-sheet.ts';
import type { RunResponse } from '#shared/api/runs.ts';
import { heldOf } from './held.ts';
import { runSummaries } from './run-summaries.ts';

/** One moment's view: a replay that ends meanwhile is not seen half. */
const SNAPSHOT = { isolationLevel: 'repeatable read', accessMode: 'read only' } as const;

/** A run, how much of it is held, and its newest run sheet if there is one. */
export async function getRun(ctx: ServiceContext, runId: string): Promise<RunResponse> {
  return ctx.db.transaction((tx) => read(within(ctx, tx), runId), SNAPSHOT);
}

async function read(ctx: ServiceContext, runId: string): Promise<RunResponse> {
  const row = await requireRun(ctx, runId, 'runs.read');
  const [run] = await runSummaries(ctx, eq(runs.id, runId));
  if (!run) throw new Error('a run without its entry');
  const [pack] = await ctx.db.select({ canonical: packs.canonical }).from(packs).where(eq(packs.digest, row.packDigest));
  if (!pack) throw new Error('a run without its pack');
  const [result] = await ctx.db
    .select()
    .from(runResults)
    .where(and(eq(runResults.runId, runId), eq(runResults.journalHead, row.head)))
    .orderBy(desc(runResults.computedAt))
    .limit(1);
  return {
    run,
    held: heldOf(row),
    pack: packSchema.parse(JSON.parse(pack.canonical)),
    sheet: result ? runSheetSchema.parse(result.sheet) : null,
    result: result
      ? {
          engine: result.engineVersion,
          packDigest: result.packDigest,
          journalHead: result.journalHead,
          amendmentHead: result.amendmentHead,
          computedMs: result.computedAt.getTime(),
        }
      : null,
    failure: row.failureMessage === null || row.failureAt === null ? null : { message: row.failureMessage, atMs: row.failureAt.getTime() },
  };
}
