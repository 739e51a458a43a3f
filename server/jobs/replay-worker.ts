import { parentPort } from 'node:worker_threads';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { replayJournal } from './replay-journal.ts';

/** The thread: one journal in, one run sheet or fault out. */
parentPort?.on('message', (journal: { readonly header: RunHeader; readonly chunks: readonly Uint8Array[] }) => {
  parentPort?.postMessage(replayJournal(journal));
});
