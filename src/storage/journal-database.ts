import Dexie, { type EntityTable, type Table } from 'dexie';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { KeptChunk } from './chunk-store.ts';
import type { Snapshot } from './journal-store.ts';
import type { StoredPack } from './pack-store.ts';
import type { StoredBlock } from './stored-block.ts';
import type { UploadProgress } from './upload-progress.ts';

export const DATABASE_NAME = 'evenline-journal';

export interface RunRow {
  readonly runId: string;
  readonly attemptId: string;
  readonly header: RunHeader;
  readonly ended: boolean;
  readonly progress: UploadProgress;
}
export type BlockRow = StoredBlock & { readonly runId: string };
export type ChunkRow = KeptChunk & { readonly runId: string };
export type SnapshotRow = Snapshot & { readonly runId: string };
/** What was cut off as unreadable. Kept, because nothing is thrown away on bad input. */
export interface DamagedRow {
  readonly id: number;
  readonly runId: string;
  readonly from: 'database' | 'mirror';
  readonly firstSeq: number;
  readonly bytes: Uint8Array;
}

/** The one database of journals, packs and the outbox. Opened by the journal worker only. */
export class JournalDatabase extends Dexie {
  declare readonly runs: EntityTable<RunRow, 'runId'>;
  declare readonly blocks: Table<BlockRow, [string, number]>;
  declare readonly chunks: Table<ChunkRow, [string, number]>;
  declare readonly snapshots: EntityTable<SnapshotRow, 'runId'>;
  declare readonly packs: EntityTable<StoredPack, 'attemptId'>;
  declare readonly damaged: EntityTable<DamagedRow, 'id'>;

  /** @param factory Where the database lies: a Storage Bucket's own, or the default one. */
  constructor(factory: { readonly indexedDB: IDBFactory; readonly IDBKeyRange: typeof IDBKeyRange }) {
    // Chromium's default lets an acknowledged commit vanish at a power cut; strict does not. Dexie takes it per instance only.
    super(DATABASE_NAME, { ...factory, chromeTransactionDurability: 'strict', cache: 'disabled' });
    this.version(1).stores({
      runs: 'runId, attemptId',
      blocks: '[runId+firstSeq]',
      chunks: '[runId+n]',
      snapshots: 'runId',
      packs: 'attemptId',
      damaged: '++id, runId',
    });
  }

  blocksOf(runId: string, fromSeq = 0): Promise<BlockRow[]> {
    return this.blocks.where('[runId+firstSeq]').between([runId, fromSeq], [runId, Dexie.maxKey]).toArray();
  }

  /** The seq that follows the last block; 0 for none. Blocks are gapless by the way they are appended. */
  async nextSeq(runId: string): Promise<number> {
    const last = await this.blocks.where('[runId+firstSeq]').between([runId, 0], [runId, Dexie.maxKey]).last();
    return last === undefined ? 0 : last.firstSeq + last.count;
  }

  async hasRun(runId: string): Promise<boolean> {
    return (await this.runs.where('runId').equals(runId).count()) > 0;
  }
}
