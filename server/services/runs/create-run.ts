import { and, eq } from 'drizzle-orm';
import { sha256Hex } from '#server/auth/tokens.ts';
import { packs } from '#server/db/schema/packs.ts';
import { runs } from '#server/db/schema/runs.ts';
import { ServiceError } from '#server/service-error.ts';
import { requireAttempt } from '#server/services/access/require-attempt.ts';
import { type RunRow, requireRun } from '#server/services/access/require-run.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import type { HeldResponse } from '#shared/api/runs.ts';
import { canonicalJson } from '#shared/canonical-json.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { heldOf } from './held.ts';

/** Takes a run's header. The same header again gives the same answer; another under the same id is refused. */
export async function createRun(
  ctx: ServiceContext,
  runId: string,
  header: RunHeader,
): Promise<{ readonly created: boolean; readonly held: HeldResponse }> {
  if (header.runId !== runId) throw new ServiceError('RUN_ID_MISMATCH', 'The run in the address and the run in the header differ.');
  const headerDigest = sha256Hex(canonicalJson(header));
  return ctx.db.transaction(async (tx) => {
    const inside = within(ctx, tx);
    const inserted = await insertRun(inside, header, headerDigest);
    if (inserted) return { created: true, held: heldOf(inserted) };
    return { created: false, held: heldOf(await sameRun(inside, runId, headerDigest)) };
  });
}

/** Null where the id is in use already, even by a request that came a moment ago. */
async function insertRun(ctx: ServiceContext, header: RunHeader, headerDigest: string): Promise<RunRow | null> {
  const [present] = await ctx.db.select({ id: runs.id }).from(runs).where(eq(runs.id, header.runId));
  if (present) return null;
  await checkBelongings(ctx, header);
  const [row] = await ctx.db
    .insert(runs)
    .values({
      id: header.runId,
      entryId: header.entryId,
      attemptId: header.attemptId,
      deviceId: header.deviceId,
      packDigest: header.packDigest,
      clockRate: header.clockRate,
      practice: header.practice,
      madeAt: new Date(header.createdMs),
      appVersion: header.appVersion,
      headerDigest,
      receivedAt: new Date(ctx.now()),
    })
    .onConflictDoNothing({ target: runs.id })
    .returning();
  return row ?? null;
}

/** Attempt, entry and pack must belong together, and the pack must be one this server handed out, to the letter. */
async function checkBelongings(ctx: ServiceContext, header: RunHeader): Promise<void> {
  const attempt = await requireAttempt(ctx, header.attemptId, 'run.upload');
  if (attempt.entryId !== header.entryId) throw new ServiceError('NOT_FOUND', 'This attempt is not of that entry.');
  const [pack] = await ctx.db
    .select({ canonical: packs.canonical })
    .from(packs)
    .where(and(eq(packs.digest, header.packDigest), eq(packs.attemptId, attempt.id)));
  if (!pack || pack.canonical !== canonicalJson(header.pack)) {
    throw new ServiceError(
      'PACK_UNKNOWN',
      'This server never handed out the pack this run was made with. Keep the journal: export it from the tablet.',
    );
  }
}

async function sameRun(ctx: ServiceContext, runId: string, headerDigest: string): Promise<RunRow> {
  const run = await requireRun(ctx, runId, 'run.upload').catch((error: unknown) => {
    if (!(error instanceof ServiceError) || error.code !== 'RUN_NOT_FOUND') throw error;
    throw new ServiceError('RUN_ID_TAKEN', 'This run id belongs to another team. Nothing was stored; export the journal from the tablet.');
  });
  if (run.headerDigest !== headerDigest) {
    throw new ServiceError(
      'RUN_CONFLICT',
      'The server holds a run of this id with another header. Nothing was changed; export the journal from the tablet.',
    );
  }
  return run;
}
