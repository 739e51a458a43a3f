import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Result } from '#shared/result.ts';
import type { StorageFailure, StoredBlock } from './stored-block.ts';
import type { UploadProgress } from './upload-progress.ts';

/** What the outbox keeps on this device. Every write resolves only when it is committed. */
export interface ChunkStore {
  /** Runs with something left to do (not sealed, or sealed and without a result), oldest first; blocked ones included. */
  pending(): Promise<readonly OutboxRun[]>;
  /** Committed blocks from `fromSeq` on, as the database has them now. */
  blocks(runId: string, fromSeq: number): Promise<Result<readonly StoredBlock[], StorageFailure>>;
  /** In order of n from 0. */
  chunks(runId: string): Promise<readonly KeptChunk[]>;
  /** A chunk that is already kept stays as it was first cut. */
  keepChunks(runId: string, chunks: readonly KeptChunk[]): Promise<void>;
  progress(runId: string, change: Partial<UploadProgress>): Promise<void>;
  /** The upload grant that came with the attempt's pack, or null. */
  grant(attemptId: string): Promise<string | null>;
}

export interface OutboxRun {
  readonly runId: string;
  readonly header: RunHeader;
  readonly ended: boolean;
  readonly progress: UploadProgress;
}

/** A chunk as it was cut: cut once, kept, sent any number of times. Its bytes are those of its blocks. */
export interface KeptChunk {
  readonly n: number;
  readonly firstSeq: number;
  readonly nextSeq: number;
  readonly length: number;
  /** SHA-256(previous digest ‖ bytes), hex. */
  readonly digest: string;
}
