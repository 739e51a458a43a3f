import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Result } from '#shared/result.ts';
import type { ChunkStore } from './chunk-store.ts';
import type { PackStore } from './pack-store.ts';
import type { StorageFailure, StoredBlock } from './stored-block.ts';
import type { UploadProgress } from './upload-progress.ts';

/**
 * What the RunSession and the outbox ask of storage. Blocks are the encoded bytes of `shared/journal`.
 * Nothing in here throws for a full, closed or missing database: failures are values, reads of nothing are empty.
 */
export interface JournalStore extends PackStore, ChunkStore {
  /** The same header again is no fault; another header under a known runId is `out-of-order`. */
  createRun(header: RunHeader): Promise<Result<void, StorageFailure>>;
  /**
   * Resolves when the block is committed strictly (database first, then the mirror). Blocks of one run arrive in order; the
   * same block again is no fault, so that a caller may repeat what it saw no answer to.
   */
  append(runId: string, block: StoredBlock): Promise<Result<void, StorageFailure>>;
  /** The longer valid one of database and mirror, the other healed from it. `recovered` says the mirror had to help. */
  readRun(runId: string): Promise<Result<StoredRun, StorageFailure>>;
  listRuns(): Promise<readonly StoredRunSummary[]>;
  /** Lets go of the run's mirror, so that another window may write it. */
  releaseRun(runId: string): Promise<void>;
  /** Deletes a run, and only one whose upload is 'safe on server'. */
  removeRun(runId: string): Promise<Result<void, StorageFailure>>;
  /** Holds every observation below `seq`. A cache: it may be missing or from another engine. */
  putSnapshot(runId: string, snapshot: Snapshot): Promise<void>;
  getSnapshot(runId: string): Promise<Snapshot | null>;
  /** Where journals lie on this device, and what was mended at the start. */
  facts(): Promise<StoreFacts>;
}

export interface Snapshot {
  readonly engine: string;
  readonly seq: number;
  readonly state: unknown;
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
  readonly upload: UploadProgress['state'];
}

export interface StoreFacts {
  /** 'own bucket' outlives a lost default database; 'default' is the fallback of browsers without Storage Buckets. */
  readonly database: 'own bucket' | 'default' | 'none';
  readonly mirror: boolean;
  /** What the person should know, in words; null when all is as it should be. */
  readonly warning: string | null;
  /** Runs whose database copy was mended from the mirror since this window opened. */
  readonly mendedRuns: readonly string[];
}
