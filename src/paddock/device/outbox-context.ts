import { createContext, useContext } from 'react';
import type { OutboxHandle } from '#src/sync/start-outbox.ts';

/** The page's outbox; null while storage opens or where it cannot be opened. */
export const OutboxContext = createContext<OutboxHandle | null>(null);

export const useOutbox = (): OutboxHandle | null => useContext(OutboxContext);
