import { useCallback, useEffect, useState } from 'react';
import { askPersistence, type PersistenceFacts } from '#src/storage/persistence.ts';

const UNKNOWN: PersistenceFacts = { persisted: false, usedBytes: null, freeBytes: null, freeHours: null };

/** What the browser promises about this origin's storage; asked for at once, and again by a touch. */
export function usePersistence(): readonly [PersistenceFacts, () => void] {
  const [facts, setFacts] = useState(UNKNOWN);
  const ask = useCallback(() => {
    // A browser that refuses to tell leaves the item missing, which is what the grid check should show.
    askPersistence().then(setFacts, () => setFacts(UNKNOWN));
  }, []);
  useEffect(ask, [ask]);
  return [facts, ask];
}
