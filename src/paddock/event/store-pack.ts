import { canonicalJson } from '#shared/canonical-json.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import { loadPack } from '#src/api/packs/load-pack.ts';
import type { PackStore, StoredPack } from '#src/storage/pack-store.ts';

export interface StorePackFailure {
  readonly message: string;
}

/**
 * Fetches the attempt's pack, proves that it is what its digest says, and stores it on this device with its upload grant.
 * A pack that is already there stays until the new one is committed.
 * @throws ApiError where the server could not give one.
 */
export async function storePack(attemptId: string, packs: PackStore, nowMs: number): Promise<Result<StoredPack, StorePackFailure>> {
  const { digest, pack, grant } = await loadPack(attemptId);
  if ((await packDigest(pack)) !== digest) return fail({ message: 'The pack arrived damaged and was not stored. Try again.' });
  const stored: StoredPack = { attemptId, digest, pack, grant, storedMs: nowMs };
  const put = await packs.putPack(stored);
  return put.ok ? ok(stored) : fail({ message: put.error.message });
}

export async function packDigest(pack: unknown): Promise<string> {
  const bytes = new TextEncoder().encode(canonicalJson(pack));
  const digest = new Uint8Array(await crypto.subtle.digest('SHA-256', bytes));
  return Array.from(digest, (byte) => byte.toString(16).padStart(2, '0')).join('');
}

export const packBytes = (stored: StoredPack): number => new TextEncoder().encode(canonicalJson(stored.pack)).byteLength;
