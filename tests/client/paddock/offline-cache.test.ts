import { dehydrate, QueryClient } from '@tanstack/react-query';
import type { PersistedClient } from '@tanstack/react-query-persist-client';
import { describe, expect, it } from 'vitest';
import { keys } from '#src/api/query-keys.ts';
import { CACHE_LIMIT_BYTES, mayKeep, serializeWithin } from '#src/paddock/cache/offline-cache.ts';

const success = { status: 'success' } as Parameters<typeof mayKeep>[0]['state'];
const kept = (queryKey: readonly unknown[], userId: string | null = 'ida', state = success) => mayKeep({ queryKey, state }, userId);

describe('offline cache', () => {
  it('keeps who is signed in and the small resources of that person', () => {
    expect(kept(keys.me)).toBe(true);
    expect(kept(keys.events('ida', 't'))).toBe(true);
    expect(kept(keys.garage('ida', 't'))).toBe(true);
  });

  it('keeps nothing of another person, nothing off the list, and no failure', () => {
    expect(kept(keys.events('tom', 't'))).toBe(false);
    expect(kept(keys.events('ida', 't'), null)).toBe(false);
    expect(kept(keys.courseBook('ida', 'b', 1))).toBe(false);
    expect(kept(['device', 'run', 'r', 3])).toBe(false);
    expect(kept(keys.events('ida', 't'), 'ida', { ...success, status: 'error' })).toBe(false);
  });

  it('drops the oldest answers until the rest fits, and who is signed in last', () => {
    const client = new QueryClient();
    client.setQueryData(keys.me, { user: 'ida' }, { updatedAt: 1 });
    for (let i = 0; i < 10; i++) client.setQueryData(keys.run('ida', `run-${i}`), 'x'.repeat(60_000), { updatedAt: 1000 + i });
    const { queries } = dehydrate(client);
    const text = serializeWithin({ timestamp: 1, buster: '1', clientState: { mutations: [], queries } });
    expect(new TextEncoder().encode(text).byteLength).toBeLessThanOrEqual(CACHE_LIMIT_BYTES);
    const names = (JSON.parse(text) as PersistedClient).clientState.queries.map(({ queryKey }) => queryKey.at(-1));
    expect(names).toEqual(['me', 'run-9', 'run-8', 'run-7', 'run-6']);
  });
});
