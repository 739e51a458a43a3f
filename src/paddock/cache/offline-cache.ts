import { createSyncStoragePersister } from '@tanstack/query-sync-storage-persister';
import type { DehydratedState, Query } from '@tanstack/react-query';
import type { PersistedClient, Persister } from '@tanstack/react-query-persist-client';

/**
 * Small paddock data kept for the time without a connection: an allow-list, one person's, at most 256 KB. Journals and
 * packs never pass through here; they have their own storage.
 */
export const CACHE_KEY = 'evenline.paddock';
export const CACHE_LIMIT_BYTES = 256 * 1024;
const ALLOWED: ReadonlySet<string> = new Set(['team', 'garage', 'events', 'runs', 'run']);

/** Only what answered well, only `me` and the allowed resources of the person who is signed in. */
export function mayKeep(query: Pick<Query, 'queryKey' | 'state'>, userId: string | null): boolean {
  if (query.state.status !== 'success') return false;
  const [first, owner, resource] = query.queryKey;
  if (first === 'me') return true;
  return first === 'user' && owner === userId && typeof resource === 'string' && ALLOWED.has(resource);
}

/** Drops the oldest answers until the rest fits; `me` goes last, because nothing can be shown without it. */
export function serializeWithin(client: PersistedClient, limit = CACHE_LIMIT_BYTES): string {
  const byAge = [...client.clientState.queries].sort((a, b) => rank(b) - rank(a));
  for (let kept = byAge.length; kept > 0; kept--) {
    const text = JSON.stringify({ ...client, clientState: { mutations: [], queries: byAge.slice(0, kept) } });
    if (new TextEncoder().encode(text).byteLength <= limit) return text;
  }
  return JSON.stringify({ ...client, clientState: { mutations: [], queries: [] } });
}

const rank = (query: DehydratedState['queries'][number]): number =>
  query.queryKey[0] === 'me' ? Number.POSITIVE_INFINITY : (query.state.dataUpdatedAt ?? 0);

export function createOfflineCache(storage: Storage | undefined): Persister {
  return createSyncStoragePersister({
    storage,
    key: CACHE_KEY,
    throttleTime: 500,
    serialize: (client) => serializeWithin(client),
  });
}
