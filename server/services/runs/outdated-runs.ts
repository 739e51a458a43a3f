import { and, eq, isNotNull, lt, notExists, sql } from 'drizzle-orm';
import { runResults } from '#server/db/schema/run-results.ts';
import { runs } from '#server/db/schema/runs.ts';
import type { ServiceDeps } from '#server/services/context.ts';

/** Sealed runs without a result of this engine: never replayed, failed, or replayed by another version. */
export async function outdatedRuns(deps: Pick<ServiceDeps, 'db'>, engineVersion: string): Promise<readonly string[]> {
  const current = deps.db
    .select({ one: sql`1` })
    .from(runResults)
    .where(and(eq(runResults.runId, runs.id), eq(runResults.engineVersion, engineVersion), eq(runResults.journalHead, runs.head)));
  const rows = await deps.db
    .select({ id: runs.id })
    .from(runs)
    .where(and(isNotNull(runs.sealedAt), notExists(current)));
  return rows.map((row) => row.id);
}

/** Runs sealed before that instant whose replay was asked for and never came: the asking may have been lost. */
export async function waitingRuns(deps: Pick<ServiceDeps, 'db'>, sealedBeforeMs: number): Promise<readonly string[]> {
  const rows = await deps.db
    .select({ id: runs.id })
    .from(runs)
    .where(and(eq(runs.status, 'computing'), lt(runs.sealedAt, new Date(sealedBeforeMs))));
  return rows.map((row) => row.id);
}
