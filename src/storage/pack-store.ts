import type { Pack } from '#shared/course/pack.ts';
import type { Result } from '#shared/result.ts';
import type { StorageFailure } from './stored-block.ts';

/** Packs on this device: all that the cockpit needs for an attempt, with no connection. One pack an attempt, the newest. */
export interface PackStore {
  putPack(pack: StoredPack): Promise<Result<void, StorageFailure>>;
  getPackForAttempt(attemptId: string): Promise<StoredPack | null>;
  listPacks(): Promise<readonly StoredPack[]>;
  /** Refused with `not-safe` while a run of the attempt still needs the pack's upload grant. */
  removePack(attemptId: string): Promise<Result<void, StorageFailure>>;
}

export interface StoredPack {
  readonly attemptId: string;
  /** SHA-256 of the pack's canonical JSON, hex. */
  readonly digest: string;
  readonly pack: Pack;
  /** The upload grant: whoever bears it may append to runs of this entry. */
  readonly grant: string;
  /** Wall clock when it was stored, unix ms. */
  readonly storedMs: number;
}
