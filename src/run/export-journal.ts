import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import { toNdjson } from '#shared/journal/ndjson.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';

/**
 * The whole journal as text: what is committed, and behind it what still waits in memory. Loaded when somebody asks.
 * @throws Error with what to do where the device's storage cannot be read.
 */
export async function exportJournal(
  store: Pick<JournalStore, 'blocks'>,
  header: RunHeader,
  waiting: readonly Journalled[],
): Promise<string> {
  const blocks = await store.blocks(header.runId, 0);
  if (!blocks.ok) throw new Error(blocks.error.message);
  return journalText(header, blocks.value, waiting);
}

/** @throws Error where a block is damaged. */
export function journalText(header: RunHeader, blocks: readonly StoredBlock[], waiting: readonly Journalled[]): string {
  const observations: Journalled[] = [];
  for (const { bytes } of blocks) {
    const read = decodeBlock(bytes);
    if (!read.ok) throw new Error(read.error.message);
    for (const observation of read.value.observations) observations.push(observation);
  }
  return toNdjson(header, [...observations, ...waiting.filter(({ seq }) => seq >= observations.length)]);
}
