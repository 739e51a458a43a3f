import { and, eq } from 'drizzle-orm';
import { runChunks } from '#server/db/schema/run-chunks.ts';
import { runs } from '#server/db/schema/runs.ts';
import { ServiceError } from '#server/service-error.ts';
import { type RunRow, requireRun } from '#server/services/access/require-run.ts';
import { type ServiceContext, within } from '#server/services/context.ts';
import type { HeldResponse } from '#shared/api/runs.ts';
import { chainDigest } from './chain.ts';
import { heldOf } from './held.ts';
import { readFrames } from './read-frames.ts';

export interface Chunk {
  readonly n: number;
  readonly bytes: Buffer;
  /** As the sender worked it out, hex. */
  readonly digest: string;
}

/**
 * Adds chunk `n`, which must be the next. The run's row is held until the chunk is committed, so repeats that arrive
 * together become one. Anything refused changes nothing.
 */
export async function appendChunk(
  ctx: ServiceContext,
  runId: string,
  chunk: Chunk,
): Promise<{ readonly added: boolean; readonly held: HeldResponse }> {
  return ctx.db.transaction(async (tx) => {
    const inside = within(ctx, tx);
    const run = await requireRun(inside, runId, 'run.upload', true);
    if (chunk.n < run.chunkCount) {
      await requireSameAgain(inside, runId, chunk);
      return { added: false, held: heldOf(run) };
    }
    const { count } = requireNext(run, chunk);
    await tx.insert(runChunks).values({ runId, ...chunk, firstSeq: run.nextSeq, count, receivedAt: new Date(ctx.now()) });
    const grown = { chunkCount: chunk.n + 1, head: chunk.digest, nextSeq: run.nextSeq + count };
    await tx.update(runs).set(grown).where(eq(runs.id, runId));
    return { added: true, held: heldOf({ ...run, ...grown }) };
  });
}

async function requireSameAgain(ctx: ServiceContext, runId: string, chunk: Chunk): Promise<void> {
  const [kept] = await ctx.db
    .select({ digest: runChunks.digest, bytes: runChunks.bytes })
    .from(runChunks)
    .where(and(eq(runChunks.runId, runId), eq(runChunks.n, chunk.n)));
  if (kept?.digest !== chunk.digest || !kept.bytes.equals(chunk.bytes)) throw otherBytes(chunk.n);
}

function requireNext(run: RunRow, chunk: Chunk): { readonly count: number } {
  if (run.sealedAt !== null) throw new ServiceError('RUN_SEALED', 'This run is sealed: nothing can be added to it.');
  if (chunk.n > run.chunkCount) {
    throw new ServiceError('SEQUENCE_GAP', `Chunk ${run.chunkCount} comes next, not ${chunk.n}.`, { expected: run.chunkCount });
  }
  if (chainDigest(run.head, chunk.bytes) !== chunk.digest) throw otherBytes(chunk.n);
  const frames = readFrames(chunk.bytes, run.nextSeq);
  if (!frames.ok) throw new ServiceError('CORRUPT_CHUNK', `Chunk ${chunk.n} is damaged and was not stored. ${frames.error}`);
  return frames.value;
}

const otherBytes = (n: number): ServiceError =>
  new ServiceError(
    'DIGEST_MISMATCH',
    `Chunk ${n} does not carry on from what the server holds. Nothing was changed; ask what is held and send on from there.`,
  );
