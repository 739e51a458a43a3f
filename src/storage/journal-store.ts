import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Result } from '#shared/result.ts';

/** What the RunSession and the outbox ask of storage. Blocks are the encoded bytes of `shared/journal`. */
export interface JournalStore {
  createRun(header: RunHeader): Promise<Result<void, StorageFailure>>;
  /** Resolves when the block is committed strictly. Blocks of one run arrive in order. */
  append(runId: string, block: StoredBlock): Promise<Result<void, StorageFailure>>;
  /** The longer valid one of database and mirror. `recovered` says the mirror had to help. */
  readRun(runId: string): Promise<Result<StoredRun, StorageFailure>>;
  listRuns(): Promise<readonly StoredRunSummary[]>;
  putSnapshot(runId: string, snapshot: { readonly engine: string; readonly seq: number; readonly state: unknown }): Promise<void>;
  getSnapshot(runId: string): Promise<{ readonly engine: string; readonly seq: number; readonly state: unknown } | null>;
}

export interface StoredBlock {
  readonly firstSeq: number;
  readonly count: number;
  readonly bytes: Uint8Array;
}

export interface StoredRun {
  readonly header: RunHeader;
  readonly blocks: readonly StoredBlock[];
  readonly recovered: 'database' | 'mirror';
}

export interface StoredRunSummary {
  readonly runId: string;
  readonly header: RunHeader;
  readonly nextSeq: number;
  readonly ended: boolean;
  /** On this device / sending / safe on server. */
  readonly upload: 'on this device' | 'sending' | 'safe on server' | 'blocked';
}

export interface StorageFailure {
  readonly code: 'quota' | 'unavailable' | 'corrupt' | 'unknown-run' | 'out-of-order';
  readonly message: string;
}
