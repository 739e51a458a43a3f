import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import { toNdjson } from '#shared/journal/ndjson.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';

/**
 * The whole journal as text: what is committed, and behind it what still waits in memory.
 * @throws Error with what to do where the device's storage cannot be read.
 */
export async function exportJournal(
  store: Pick<JournalStore, 'blocks'>,
  header: RunHeader,
  waiting: readonly Journalled[],
): Promise<string> {
  const blocks = await store.blocks(header.runId, 0);
  if (!blocks.ok) throw new Error(blocks.error.message);
  const observations: Journalled[] = [];
  for (const { bytes } of blocks.value) {
    const read = decodeBlock(bytes);
    if (!read.ok) throw new Error(read.error.message);
    for (const observation of read.value.observations) observations.push(observation);
  }
  return toNdjson(header, [...observations, ...waiting.filter(({ seq }) => seq >= observations.length)]);
}
