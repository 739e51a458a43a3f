import { decodeBlock } from '#shared/journal/block.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { RunRow } from './journal-database.ts';
import type { StoredBlock } from './stored-block.ts';
import { NOTHING_SENT } from './upload-progress.ts';

export function newRunRow(header: RunHeader, blocks: readonly StoredBlock[] = []): RunRow {
  return { runId: header.runId, attemptId: header.attemptId, header, ended: blocks.some(endsRun), progress: NOTHING_SENT };
}

/** True for the block in which the crew closed the run: an act, so alone in its block. */
export function endsRun(block: StoredBlock): boolean {
  if (block.count !== 1) return false;
  const read = decodeBlock(block.bytes);
  return read.ok && read.value.observations[0]?.type === 'run-ended.v1';
}
