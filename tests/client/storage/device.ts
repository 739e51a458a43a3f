import { IDBFactory, IDBKeyRange } from 'fake-indexeddb';
import { encodeBlock, type Journalled } from '#shared/journal/block.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { createJournalBackend } from '#src/storage/journal-backend.ts';
import { DATABASE_NAME, JournalDatabase } from '#src/storage/journal-database.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { HEADER } from '#tests/unit/journal/header.ts';
import { MemoryDisk, type MemoryWindow } from './memory-disk.ts';

/** A tablet: a database and a disk that outlive every window opened on them. */
export class Device {
  indexedDB = new IDBFactory();
  readonly disk = new MemoryDisk();

  async window(): Promise<DeviceWindow> {
    const life = { over: false };
    const db = new JournalDatabase({ indexedDB: untilOver(this.indexedDB, life), IDBKeyRange });
    const folder = this.disk.window();
    const store = await createJournalBackend({ db, folder, database: 'own bucket' });
    return {
      store,
      db,
      folder,
      kill: () => {
        life.over = true;
        folder.kill();
        db.close();
      },
    };
  }

  /** The browser deleted every database of the origin, as it does after a torn log. */
  loseDatabases(): void {
    this.indexedDB = new IDBFactory();
  }

  /** Direct access to the rows, as damage has it. */
  async tamper<T>(work: (db: JournalDatabase) => Promise<T>): Promise<T> {
    const db = new JournalDatabase({ indexedDB: this.indexedDB, IDBKeyRange });
    try {
      return await work(db);
    } finally {
      db.close();
    }
  }
}

/** The database as a window has it that may be killed: then nothing it still wants to do opens it again. */
function untilOver(factory: IDBFactory, life: { readonly over: boolean }): IDBFactory {
  return new Proxy(factory, {
    get: (target, name) => {
      if (life.over) throw new DOMException('this window was killed', 'AbortError');
      const value: unknown = Reflect.get(target, name);
      return typeof value === 'function' ? value.bind(target) : value;
    },
  });
}

export interface DeviceWindow {
  readonly store: JournalStore;
  readonly db: JournalDatabase;
  readonly folder: MemoryWindow;
  kill(): void;
}

export { DATABASE_NAME };

export const headerOf = (runId: string): RunHeader => ({ ...HEADER, runId });

/** Block number `n` of a made-up run: `size` pulses, or one tap alone for every tenth. */
export function blockAt(firstSeq: number, size: number): StoredBlock {
  const observations: Journalled[] = Array.from({ length: size }, (_, i) => {
    const seq = firstSeq + i;
    return size === 1
      ? { seq, at: seq * 10_000, type: 'tap.v1', input: 'glass', checkpoint: null }
      : { seq, at: seq * 10_000, type: 'pulse.v1', channel: 1, count: seq * 3, boxUs: seq * 10_000 };
  });
  return { firstSeq, count: size, bytes: encodeBlock(firstSeq, observations) };
}

/** Blocks of 25 pulses and single taps, from seq 0. */
export function blocksOfRun(howMany: number): readonly StoredBlock[] {
  const blocks: StoredBlock[] = [];
  let seq = 0;
  for (let n = 0; n < howMany; n++) {
    const block = blockAt(seq, n % 10 === 9 ? 1 : 25);
    blocks.push(block);
    seq += block.count;
  }
  return blocks;
}

export function must<T>(
  result: { readonly ok: true; readonly value: T } | { readonly ok: false; readonly error: { readonly message: string } },
): T {
  if (!result.ok) throw new Error(result.error.message);
  return result.value;
}
