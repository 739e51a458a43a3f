import { afterEach, describe, expect, it, vi } from 'vitest';
import { ok } from '#shared/result.ts';
import { packDigest, storePack } from '#src/paddock/event/store-pack.ts';
import type { PackStore, StoredPack } from '#src/storage/pack-store.ts';
import { IDS, samplePack } from './sample-pack.ts';

const GRANT = 'g'.repeat(43);
const answer = (digest: string) =>
  vi.stubGlobal('fetch', async () => Response.json({ digest, pack: samplePack, grant: GRANT, grantExpiresMs: Date.UTC(2026, 6, 13) }));

function shelf() {
  const stored: StoredPack[] = [];
  const packs = { putPack: async (pack: StoredPack) => ok(void stored.push(pack)) } as unknown as PackStore;
  return { stored, packs };
}

afterEach(() => vi.unstubAllGlobals());

describe('storing a pack', () => {
  it('keeps pack, digest and grant together', async () => {
    const digest = await packDigest(samplePack);
    answer(digest);
    const { stored, packs } = shelf();
    const result = await storePack(IDS.morning, packs, 1_780_000_000_000);
    expect(result.ok).toBe(true);
    expect(stored).toEqual([{ attemptId: IDS.morning, digest, pack: samplePack, grant: GRANT, storedMs: 1_780_000_000_000 }]);
  });

  it('stores nothing that is not what its digest says', async () => {
    answer('b'.repeat(64));
    const { stored, packs } = shelf();
    const result = await storePack(IDS.morning, packs, 1);
    expect(result.ok).toBe(false);
    expect(stored).toEqual([]);
  });
});
