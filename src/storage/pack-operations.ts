import { ok } from '#shared/result.ts';
import { guarded } from './guarded.ts';
import type { JournalDatabase } from './journal-database.ts';
import type { PackStore } from './pack-store.ts';
import { storageFail, valueOrThrow } from './storage-fault.ts';

export function packOperations(db: JournalDatabase): PackStore {
  return {
    putPack: async (pack) => {
      const put = await guarded(db, () => db.packs.put(pack));
      return put.ok ? ok(undefined) : put;
    },
    getPackForAttempt: async (attemptId) => valueOrThrow(await guarded(db, () => db.packs.get(attemptId))) ?? null,
    listPacks: async () => valueOrThrow(await guarded(db, () => db.packs.toArray())),
    removePack: async (attemptId) => {
      const removed = await guarded(db, () =>
        db.transaction('rw', [db.packs, db.runs], async () => {
          const runs = await db.runs.where('attemptId').equals(attemptId).toArray();
          if (runs.some((run) => run.progress.state !== 'safe on server')) return false;
          await db.packs.delete(attemptId);
          return true;
        }),
      );
      if (!removed.ok) return removed;
      return removed.value ? ok(undefined) : storageFail('not-safe');
    },
  };
}
