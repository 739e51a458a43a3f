import { ServiceError } from '#server/service-error.ts';
import { requireRun } from '#server/services/access/require-run.ts';
import type { ServiceContext } from '#server/services/context.ts';
import { decodeBlocks, type Journalled } from '#shared/journal/block.ts';
import { toNdjson } from '#shared/journal/ndjson.ts';
import { readJournal } from './read-journal.ts';

/** The journal as the server holds it, sealed or not, in the text form that `fromNdjson` and `npm run replay` read. */
export async function exportJournal(ctx: ServiceContext, runId: string): Promise<string> {
  const { header, chunks } = await readJournal(ctx, await requireRun(ctx, runId, 'runs.read'));
  return toNdjson(header, observationsOf(chunks));
}

function* observationsOf(chunks: readonly Uint8Array[]): Generator<Journalled> {
  for (const [n, bytes] of chunks.entries()) {
    const blocks = decodeBlocks(bytes);
    if (!blocks.ok)
      throw new ServiceError('CORRUPT_CHUNK', `Chunk ${n} cannot be read: ${blocks.error.message} A newer Evenline may read it.`);
    for (const block of blocks.value) yield* block.observations;
  }
}
