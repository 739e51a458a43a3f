import { useEffect, useState } from 'react';
import type { JournalStore, StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';

export interface Stored {
  readonly packs: readonly StoredPack[];
  readonly runs: readonly StoredRunSummary[];
  /** What the person should know about storage here; null when all is well. */
  readonly warning: string | null;
}

/** The upload of a run moves on without a touch; looked at this often. */
const LOOK_MS = 2000;

/** What lies on this device; undefined until it has been read. */
export function useStored(store: JournalStore): Stored | undefined {
  const [stored, setStored] = useState<Stored>();
  useEffect(() => {
    let gone = false;
    const look = async (): Promise<void> => {
      const [packs, runs, facts] = await Promise.all([store.listPacks(), store.listRuns(), store.facts()]);
      if (!gone) setStored({ packs, runs, warning: facts.warning });
    };
    // A worker that failed answers nothing; the next look starts a new one.
    const lookAgain = (): void => void look().catch((error: unknown) => console.error(error));
    lookAgain();
    const timer = setInterval(lookAgain, LOOK_MS);
    return () => {
      gone = true;
      clearInterval(timer);
    };
  }, [store]);
  return stored;
}
