import { asc, eq } from 'drizzle-orm';
import { attempts } from '#server/db/schema/attempts.ts';
import { countingRuns } from '#server/db/schema/counting-runs.ts';
import { runs } from '#server/db/schema/runs.ts';
import type { AttemptRow } from '#server/services/access/require-attempt.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { buildPack } from '#server/services/packs/build-pack.ts';
import { runSummaries } from '#server/services/runs/run-summaries.ts';
import type { BookSummary } from './book-summaries.ts';

/** Attempts of an entry in order. `own` false leaves out what is private to the entry's team. */
export async function attemptsOf(ctx: ServiceContext, entryId: string, own: boolean, books: readonly BookSummary[]) {
  const rows = await ctx.db
    .select({ attempt: attempts, countingRunId: countingRuns.runId })
    .from(attempts)
    .leftJoin(countingRuns, eq(countingRuns.attemptId, attempts.id))
    .where(eq(attempts.entryId, entryId))
    .orderBy(asc(attempts.number));
  const entryRuns = own ? await runSummaries(ctx, eq(runs.entryId, entryId)) : [];
  return Promise.all(
    rows.map(async ({ attempt, countingRunId }) => {
      const courseBook = books.find((book) => book.id === attempt.courseBookId && book.version === attempt.courseBookVersion);
      if (!courseBook) throw new Error('an attempt without its course book');
      return {
        id: attempt.id,
        number: attempt.number,
        releaseMs: attempt.releaseAt?.getTime() ?? null,
        stagedBehindM: attempt.stagedBehindM,
        courseBook,
        ...(own ? await packView(ctx, attempt) : { ownCheckpoints: 0, packDigest: null, packFault: null }),
        countingRunId: own ? countingRunId : null,
        runs: entryRuns.filter((run) => run.attemptId === attempt.id),
      };
    }),
  );
}

async function packView(ctx: ServiceContext, attempt: AttemptRow) {
  const built = await buildPack(ctx, attempt);
  return built.ok
    ? { ownCheckpoints: built.value.pack.ownCheckpoints.length, packDigest: built.value.digest, packFault: null }
    : { ownCheckpoints: 0, packDigest: null, packFault: built.error.message };
}
