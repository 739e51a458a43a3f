import type { JournalStore } from '#src/storage/journal-store.ts';

/** Starts sending once its part is here, which no screen waits for; the returned function stops it, or lets it not begin. */
export function startOutboxLater(store: JournalStore): () => void {
  let stop: (() => void) | null = null;
  let gone = false;
  const start = async (): Promise<void> => {
    const { startOutbox } = await import('#src/sync/start-outbox.ts');
    if (!gone) ({ stop } = startOutbox(store));
  };
  // Where it could not be had, journals wait on the device for the next page, as without a connection.
  start().catch((error: unknown) => console.error(error));
  return () => {
    gone = true;
    stop?.();
  };
}
