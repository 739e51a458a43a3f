import { decodeBlock } from '#shared/journal/block.ts';
import { toNdjson } from '#shared/journal/ndjson.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';

/** Hands a file to the browser's own download; needs no server and no connection. */
export function saveText(name: string, text: string): void {
  const url = URL.createObjectURL(new Blob([text], { type: 'application/x-ndjson' }));
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  URL.revokeObjectURL(url);
}

export const journalFileName = (runId: string): string => `evenline-${runId}.ndjson`;

/** The journal of a stored run as NDJSON; false where it cannot be read whole. */
export async function exportRun(store: JournalStore, runId: string): Promise<boolean> {
  const stored = await store.readRun(runId);
  if (!stored.ok) return false;
  const blocks = stored.value.blocks.map((block) => decodeBlock(block.bytes));
  const observations = blocks.flatMap((block) => (block.ok ? block.value.observations : []));
  if (blocks.some((block) => !block.ok)) return false;
  saveText(journalFileName(runId), toNdjson(stored.value.header, observations));
  return true;
}
