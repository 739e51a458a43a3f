import type { ChunkStore } from './chunk-store.ts';
import { guarded } from './guarded.ts';
import type { JournalDatabase } from './journal-database.ts';
import type { Mirrors } from './mirrors.ts';
import { valueOrThrow } from './storage-fault.ts';

export function chunkOperations(db: JournalDatabase, mirrors: Mirrors): ChunkStore {
  return {
    pending: async () => {
      const rows = valueOrThrow(await guarded(db, () => db.runs.toArray()));
      return rows
        .filter(({ progress }) => progress.state !== 'safe on server' || !progress.derived)
        .sort((a, b) => a.header.createdMs - b.header.createdMs)
        .map(({ runId, header, ended, progress }) => ({ runId, header, ended, progress }));
    },
    blocks: (runId, fromSeq) =>
      guarded(db, async () => (await db.blocksOf(runId, fromSeq)).map(({ firstSeq, count, bytes }) => ({ firstSeq, count, bytes }))),
    chunks: async (runId) => {
      const rows = valueOrThrow(await guarded(db, () => db.chunks.where('[runId+n]').between([runId, 0], [runId, Infinity]).toArray()));
      return rows.map(({ runId: _key, ...chunk }) => chunk);
    },
    keepChunks: async (runId, chunks) => {
      valueOrThrow(
        await guarded(db, () =>
          db.transaction('rw', db.chunks, async () => {
            const known = await db.chunks.bulkGet(chunks.map((chunk): [string, number] => [runId, chunk.n]));
            await db.chunks.bulkAdd(chunks.filter((_, i) => known[i] === undefined).map((chunk) => ({ ...chunk, runId })));
          }),
        ),
      );
      await mirrors.keepChunks(runId, chunks);
    },
    progress: async (runId, change) => {
      valueOrThrow(
        await guarded(db, () =>
          db.transaction('rw', db.runs, async () => {
            const row = await db.runs.get(runId);
            if (row !== undefined) await db.runs.update(runId, { progress: { ...row.progress, ...change } });
          }),
        ),
      );
    },
    grant: async (attemptId) => valueOrThrow(await guarded(db, () => db.packs.get(attemptId)))?.grant ?? null,
  };
}
