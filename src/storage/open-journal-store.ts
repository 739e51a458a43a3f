import type { JournalStore } from './journal-store.ts';
import { connectStore, type StoreClient } from './store-calls.ts';

let current: StoreClient | null = null;

/** This window's journal store: one worker however often it is asked for. A worker that died is replaced at the next call. */
export async function openJournalStore(): Promise<JournalStore> {
  return revived;
}

/** Passes every call on to the worker that lives now; callers keep this one object for good. */
const revived = new Proxy({} as JournalStore, {
  get: (_none, method) => {
    // A promise resolves with this object: it must not look like a promise itself.
    if (method === 'then') return undefined;
    current ??= startWorker();
    return current.store[method as keyof JournalStore];
  },
});

function startWorker(): StoreClient {
  const worker = new Worker(new URL('./journal-worker.ts', import.meta.url), { type: 'module', name: 'evenline-journal' });
  const client = connectStore(worker);
  const lost = (reason: string): void => {
    if (current === client) current = null;
    worker.terminate();
    client.fail(reason);
  };
  worker.addEventListener('error', (event) => lost(event.message === '' ? 'the journal worker could not be loaded' : event.message));
  worker.addEventListener('messageerror', () => lost('the journal worker answered something unreadable'));
  return client;
}
