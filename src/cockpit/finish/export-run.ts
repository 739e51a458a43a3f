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

/** Saves the journal of a stored run as NDJSON; false or a rejection where it cannot be read whole. */
export async function exportRun(store: JournalStore, runId: string): Promise<boolean> {
  const stored = await store.readRun(runId);
  if (!stored.ok) return false;
  const { journalText } = await import('#src/run/export-journal.ts');
  saveText(journalFileName(runId), journalText(stored.value.header, stored.value.blocks, []));
  return true;
}
