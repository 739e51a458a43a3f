import type { RunHeader } from '#shared/journal/run-header.ts';
import type { Result } from '#shared/result.ts';
import type { StorageFailure, StoredBlock } from '#src/storage/journal-store.ts';

/** What the outbox asks of this device's storage. Every write resolves only when it is committed. */
export interface OutboxStore {
  /** Runs with something left to do (not sealed, or sealed and without a result), oldest first; blocked ones included. */
  pending(): Promise<readonly OutboxRun[]>;
  blocks(runId: string, fromSeq: number): Promise<Result<readonly StoredBlock[], StorageFailure>>;
  /** In order of n from 0. */
  chunks(runId: string): Promise<readonly KeptChunk[]>;
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

/** A chunk as it was cut: cut once, kept, sent any number of times. */
export interface KeptChunk {
  readonly n: number;
  readonly firstSeq: number;
  readonly nextSeq: number;
  readonly length: number;
  /** SHA-256(previous digest ‖ bytes), hex. */
  readonly digest: string;
}

export interface UploadProgress {
  /** 'sending' only while the server answers; 'safe on server' only after it sealed this very journal. */
  readonly state: 'on this device' | 'sending' | 'safe on server' | 'blocked';
  /** Chunks the server confirmed. */
  readonly confirmed: number;
  /** The server has derived the result from the sealed journal. */
  readonly derived: boolean;
  /** Why nothing is being sent, for the person to read; null when all is well. */
  readonly blocked: { readonly code: string; readonly message: string } | null;
}

export const NOTHING_SENT: UploadProgress = { state: 'on this device', confirmed: 0, derived: false, blocked: null };
