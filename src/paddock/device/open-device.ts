import { openJournalStore } from '#src/storage/open-journal-store.ts';
import { watchChanges } from '#src/storage/storage-changes.ts';
import type { DeviceStorage } from './device-storage.ts';

export async function openDevice(): Promise<DeviceStorage> {
  const store = await openJournalStore();
  return { journals: store, packs: store, chunks: store, watch };
}

/** Reads now and after every change; a slow answer never overtakes a newer one. */
function watch<T>(read: () => Promise<T>, changed: (value: T) => void): () => void {
  let ended = false;
  let newest = 0;
  const look = (): void => {
    const mine = ++newest;
    read().then(
      (value) => {
        if (!ended && mine === newest) changed(value);
      },
      (error: unknown) => console.error(error),
    );
  };
  const unwatch = watchChanges(look);
  look();
  return () => {
    ended = true;
    unwatch();
  };
}
