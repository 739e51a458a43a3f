import { useSyncExternalStore } from 'react';

function subscribe(listener: () => void): () => void {
  addEventListener('online', listener);
  addEventListener('offline', listener);
  return () => {
    removeEventListener('online', listener);
    removeEventListener('offline', listener);
  };
}

/** What the browser believes; good enough to word a hint, never to decide whether to send. */
export const useOnline = (): boolean => useSyncExternalStore(subscribe, () => navigator.onLine);
