import { and, eq, sql } from 'drizzle-orm';
import { runChunks } from '#server/db/schema/run-chunks.ts';
import { ServiceError } from '#server/service-error.ts';
import { type RunRow, requireRun } from '#server/services/access/require-run.ts';
import type { ServiceContext } from '#server/services/context.ts';
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

/** Somebody else added a chunk in between so many times: never in earnest, for one tablet sends one run. */
const TRIES = 5;

/**
 * Adds chunk `n`, which must be the next. What is held is read, the chunk judged by it, and then added on condition that it
 * is still so: of several that arrive together one is added, and the others find it there. Anything refused changes nothing.
 */
export async function appendChunk(
  ctx: ServiceContext,
  runId: string,
  chunk: Chunk,
): Promise<{ readonly added: boolean; readonly held: HeldResponse }> {
  for (let i = 0; i < TRIES; i++) {
    const run = await requireRun(ctx, runId, 'run.upload');
    if (chunk.n < run.chunkCount) {
      await requireSameAgain(ctx, runId, chunk);
      return { added: false, held: heldOf(run) };
    }
    const { count } = requireNext(run, chunk);
    const grown = { ...run, chunkCount: chunk.n + 1, head: chunk.digest, nextSeq: run.nextSeq + count };
    if (await addIfUnchanged(ctx, run, grown, chunk)) return { added: true, held: heldOf(grown) };
  }
  throw new ServiceError('BUSY', 'This run is being sent from several places at once. Try again in a few seconds.', { retryAfterS: 5 });
}

/** One statement, so one transaction and one way there: the run grows only from the state that was read, and the chunk only with it. */
async function addIfUnchanged(ctx: ServiceContext, run: RunRow, grown: RunRow, chunk: Chunk): Promise<boolean> {
  const { rowCount } = await ctx.db.execute(sql`
    with grown as (
      update runs set chunk_count = ${grown.chunkCount}, head = ${grown.head}, next_seq = ${grown.nextSeq}
      where id = ${run.id} and chunk_count = ${run.chunkCount} and head = ${run.head} and sealed_at is null
      returning id
    )
    insert into run_chunks (run_id, n, bytes, digest, first_seq, count, received_at)
    select id, ${chunk.n}::int, ${chunk.bytes}::bytea, ${chunk.digest}, ${run.nextSeq}::bigint, ${grown.nextSeq - run.nextSeq}::int,
      ${new Date(ctx.now())}::timestamptz
    from grown`);
  return rowCount === 1;
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
