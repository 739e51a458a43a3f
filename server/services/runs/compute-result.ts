import { and, eq } from 'drizzle-orm';
import type { Database } from '#server/db/connect.ts';
import { checkpointRecords } from '#server/db/schema/checkpoint-records.ts';
import { runResults } from '#server/db/schema/run-results.ts';
import { runs } from '#server/db/schema/runs.ts';
import type { RunRow } from '#server/services/access/require-run.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import type { Result } from '#shared/result.ts';
import { readJournal, type StoredJournal } from './read-journal.ts';

/** Folds a journal into its run sheet, somewhere that does not hold up requests. A fault is a sentence. */
export type Replay = (journal: StoredJournal) => Promise<Result<RunSheet, string>>;

/** Replays one sealed run and keeps the result. Doing it twice is harmless: results have a key. */
export async function computeResult(deps: Pick<ServiceDeps, 'db' | 'now'>, runId: string, replay: Replay): Promise<void> {
  const [run] = await deps.db.select().from(runs).where(eq(runs.id, runId));
  if (!run || run.sealedAt === null) return;
  const sheet = await replay(await readJournal(deps, run));
  if (!sheet.ok) return noteFailure(deps, runId, sheet.error);
  await deps.db.transaction(async (tx) => {
    await keepResult(tx, run, sheet.value, new Date(deps.now()));
    await tx.update(runs).set({ status: 'ready', failureMessage: null, failureAt: null }).where(eq(runs.id, runId));
  });
}

/** A replay that failed is shown with the run; its journal stays, and the next start tries again. */
export async function noteFailure(deps: Pick<ServiceDeps, 'db' | 'now'>, runId: string, message: string): Promise<void> {
  await deps.db
    .update(runs)
    .set({ status: 'failed', failureMessage: message, failureAt: new Date(deps.now()) })
    .where(and(eq(runs.id, runId)));
}

async function keepResult(db: Database, run: RunRow, sheet: RunSheet, computedAt: Date): Promise<void> {
  const [result] = await db
    .insert(runResults)
    .values({
      runId: run.id,
      packDigest: run.packDigest,
      engineVersion: sheet.engine,
      journalHead: run.head,
      amendmentHead: ZERO_DIGEST,
      sheet,
      computedAt,
    })
    .onConflictDoNothing()
    .returning({ id: runResults.id });
  if (!result || sheet.legs.length === 0) return;
  await db.insert(checkpointRecords).values(
    sheet.legs.map((leg, position) => ({
      resultId: result.id,
      checkpointId: leg.checkpointId,
      position,
      passedBy: leg.by,
      officialM: leg.officialM,
      atUs: leg.atUs,
      elapsedS: leg.elapsedS,
      timeErrorS: leg.timeErrorS,
      movedM: leg.movedM,
      scaleBefore: leg.scaleBefore,
      scaleAfter: leg.scaleAfter,
    })),
  );
}
