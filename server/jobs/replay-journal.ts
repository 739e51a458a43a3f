import type { StoredJournal } from '#server/services/runs/read-journal.ts';
import { decodeBlocks, type Journalled } from '#shared/journal/block.ts';
import { replay } from '#shared/journal/replay.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/** The fold itself: chunks to run sheet, with the very code the cockpit runs. */
export function replayJournal({
  header,
  chunks,
}: Pick<StoredJournal, 'header'> & { readonly chunks: readonly Uint8Array[] }): Result<RunSheet, string> {
  const observations: Journalled[] = [];
  for (const [n, bytes] of chunks.entries()) {
    const blocks = decodeBlocks(bytes);
    if (!blocks.ok)
      return fail(`Chunk ${n} of the journal cannot be read: ${blocks.error.message} The journal is kept; a newer Evenline may read it.`);
    for (const block of blocks.value) for (const observation of block.observations) observations.push(observation);
  }
  return ok(runSheet(replay(header, observations), header));
}
