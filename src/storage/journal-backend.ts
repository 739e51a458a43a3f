import { ok, type Result } from '#shared/result.ts';
import { chunkOperations } from './chunk-operations.ts';
import { guarded } from './guarded.ts';
import type { JournalDatabase } from './journal-database.ts';
import type { JournalStore, StoredRun, StoredRunSummary, StoreFacts } from './journal-store.ts';
import type { MirrorFolder } from './mirror-file.ts';
import { Mirrors } from './mirrors.ts';
import { packOperations } from './pack-operations.ts';
import { appendBlock, createRun } from './run-writer.ts';
import { storageFail, valueOrThrow } from './storage-fault.ts';
import type { StorageFailure } from './stored-block.ts';

export interface BackendPlace {
  readonly db: JournalDatabase;
  /** Null where the browser has no private file system: the database stands alone. */
  readonly folder: MirrorFolder | null;
  readonly database: StoreFacts['database'];
}

/** The journal store itself, on whichever thread it runs. Knows nothing of workers. */
export async function createJournalBackend({ db, folder, database }: BackendPlace): Promise<JournalStore> {
  const mirrors = new Mirrors(db, folder);
  const inTurn = createTurns();
  const opened = await guarded(db, async () => void (await db.open()));
  if (opened.ok) await mirrors.adopt();
  const chunks = chunkOperations(db, mirrors);
  return {
    ...packOperations(db),
    ...chunks,
    keepChunks: (runId, cut) => inTurn(() => chunks.keepChunks(runId, cut)),
    createRun: (header) => inTurn(() => createRun(db, mirrors, header)),
    append: (runId, block) => inTurn(() => appendBlock(db, mirrors, runId, block)),
    readRun: (runId) => inTurn(() => readRun(db, mirrors, runId)),
    releaseRun: (runId) => inTurn(async () => mirrors.release(runId)),
    removeRun: (runId) => inTurn(() => removeRun(db, mirrors, runId)),
    listRuns: async () => valueOrThrow(await guarded(db, () => listRuns(db))),
    putSnapshot: async (runId, snapshot) => {
      // A cache: where it cannot be written, the journal still holds everything.
      await guarded(db, () => db.snapshots.put({ ...snapshot, runId }));
    },
    getSnapshot: async (runId) => {
      const row = await guarded(db, () => db.snapshots.get(runId));
      return row.ok && row.value !== undefined ? { engine: row.value.engine, seq: row.value.seq, state: row.value.state } : null;
    },
    facts: async () => factsOf(opened.ok ? database : 'none', mirrors, opened.ok ? null : opened.error.message),
  };
}

/** One behind the other: a block must see the one before it committed, and nobody closes the mirror under another's hands. */
function createTurns(): <T>(work: () => Promise<T>) => Promise<T> {
  let last: Promise<unknown> = Promise.resolve();
  return (work) => {
    const mine = last.then(work);
    last = mine.catch(() => undefined);
    return mine;
  };
}

async function readRun(db: JournalDatabase, mirrors: Mirrors, runId: string): Promise<Result<StoredRun, StorageFailure>> {
  const run = await guarded(db, () => mirrors.level(runId));
  if (!run.ok) return run;
  return run.value === null ? storageFail('unknown-run') : ok(run.value);
}

async function listRuns(db: JournalDatabase): Promise<readonly StoredRunSummary[]> {
  const rows = await db.runs.toArray();
  return Promise.all(
    rows.map(async ({ runId, header, ended, progress }) => ({
      runId,
      header,
      ended,
      upload: progress.state,
      nextSeq: await db.nextSeq(runId),
    })),
  );
}

async function removeRun(db: JournalDatabase, mirrors: Mirrors, runId: string): Promise<Result<void, StorageFailure>> {
  const removed = await guarded(db, () =>
    db.transaction('rw', [db.runs, db.blocks, db.chunks, db.snapshots, db.damaged], async () => {
      const row = await db.runs.get(runId);
      if (row === undefined) return 'unknown-run';
      if (row.progress.state !== 'safe on server') return 'not-safe';
      await db.blocks.where('[runId+firstSeq]').between([runId, 0], [runId, Infinity]).delete();
      await db.chunks.where('[runId+n]').between([runId, 0], [runId, Infinity]).delete();
      await db.snapshots.delete(runId);
      await db.damaged.where('runId').equals(runId).delete();
      await db.runs.delete(runId);
      return 'removed';
    }),
  );
  if (!removed.ok) return removed;
  if (removed.value !== 'removed') return storageFail(removed.value);
  await mirrors.remove(runId);
  return ok(undefined);
}

function factsOf(database: StoreFacts['database'], mirrors: Mirrors, failure: string | null): StoreFacts {
  const warnings = [
    failure,
    database === 'default' ? 'This browser keeps journals beside other data. Use Chromium 122 or later for a store of their own.' : null,
    mirrors.present ? mirrors.warning : 'This browser keeps no second copy of the journal. Export the run after the finish.',
  ];
  const warning = warnings.filter((line) => line !== null).join(' ');
  return { database, mirror: mirrors.present, warning: warning === '' ? null : warning, mendedRuns: [...mirrors.mended] };
}
