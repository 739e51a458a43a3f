import { asc, eq } from 'drizzle-orm';
import { packs } from '#server/db/schema/packs.ts';
import { runChunks } from '#server/db/schema/run-chunks.ts';
import type { RunRow } from '#server/services/access/require-run.ts';
import type { ServiceDeps } from '#server/services/context.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';

export interface StoredJournal {
  readonly header: RunHeader;
  /** In order, byte for byte as they came. */
  readonly chunks: readonly Buffer[];
}

/** A run's header, put together again, and its chunks. */
export async function readJournal(deps: Pick<ServiceDeps, 'db'>, run: RunRow): Promise<StoredJournal> {
  const [pack] = await deps.db.select({ canonical: packs.canonical }).from(packs).where(eq(packs.digest, run.packDigest));
  if (!pack) throw new Error('a run without its pack');
  const rows = await deps.db
    .select({ bytes: runChunks.bytes })
    .from(runChunks)
    .where(eq(runChunks.runId, run.id))
    .orderBy(asc(runChunks.n));
  return {
    header: {
      format: 'evenline-journal',
      version: 1,
      runId: run.id,
      deviceId: run.deviceId,
      entryId: run.entryId,
      attemptId: run.attemptId,
      packDigest: run.packDigest,
      // Kept as the canonical JSON of a checked pack, under its own digest: needs no second check.
      pack: JSON.parse(pack.canonical) as Pack,
      clockRate: run.clockRate,
      practice: run.practice,
      createdMs: run.madeAt.getTime(),
      appVersion: run.appVersion,
    },
    chunks: rows.map((row) => row.bytes),
  };
}
