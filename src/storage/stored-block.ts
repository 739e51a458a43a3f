/** What every store hands about: a block as it lies in storage, and why storing failed. */
export interface StoredBlock {
  readonly firstSeq: number;
  readonly count: number;
  readonly bytes: Uint8Array;
}

export interface StorageFailure {
  readonly code: 'quota' | 'unavailable' | 'corrupt' | 'unknown-run' | 'out-of-order' | 'not-safe';
  readonly message: string;
}
