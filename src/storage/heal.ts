import { checkBlock } from '#shared/journal/block.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { KeptChunk } from './chunk-store.ts';
import type { BlockRow, JournalDatabase } from './journal-database.ts';
import type { StoredRun } from './journal-store.ts';
import type { MirrorContent } from './mirror-frames.ts';
import type { OpenMirror } from './mirror-journal.ts';
import { newRunRow } from './run-row.ts';
import type { StoredBlock } from './stored-block.ts';

/**
 * Two copies of one run, the database's and the mirror's: the longer valid one wins and the other is made like it. What is cut
 * off as damaged goes to the table `damaged`, never away.
 */

/** @param copy What the mirror holds; null for no mirror. @returns Null for a run neither copy holds. */
export async function healDatabase(db: JournalDatabase, runId: string, copy: MirrorContent | null): Promise<StoredRun | null> {
  const row = await db.runs.get(runId);
  const rows = await db.blocksOf(runId);
  const sound = soundPrefix(rows);
  const header = row?.header ?? copy?.header ?? null;
  if (header === null) return null;
  const mirrorWins = copy !== null && endOf(copy.blocks) > endOf(sound);
  const blocks = mirrorWins ? copy.blocks : sound;
  if (row === undefined || rows.length !== sound.length || mirrorWins) {
    await mendDatabase(db, { header, rows, sound, blocks, chunks: copy?.chunks ?? [] });
  }
  return { header, blocks: blocks.map(plainBlock), recovered: mirrorWins || row === undefined ? 'mirror' : 'database' };
}

/** The other way round: the mirror gets what the winner has, and loses its damaged tail. */
export async function healMirror(db: JournalDatabase, mirror: OpenMirror, { header, blocks }: StoredRun): Promise<void> {
  const tail = mirror.damagedTail();
  if (tail.byteLength > 0) {
    await db.damaged.add({ runId: header.runId, from: 'mirror', firstSeq: mirror.end, bytes: tail });
    mirror.trim();
  }
  if (mirror.blank) mirror.begin(header);
  mirror.append(blocks);
}

const plainBlock = ({ firstSeq, count, bytes }: StoredBlock): StoredBlock => ({ firstSeq, count, bytes });

/** The rows up to the first that is damaged or does not follow. */
function soundPrefix(rows: readonly BlockRow[]): readonly BlockRow[] {
  let expected = 0;
  for (const [i, row] of rows.entries()) {
    const head = checkBlock(row.bytes);
    if (!head.ok || row.firstSeq !== expected || head.value.firstSeq !== expected || head.value.count !== row.count)
      return rows.slice(0, i);
    expected += row.count;
  }
  return rows;
}

interface Mending {
  readonly header: RunHeader;
  readonly rows: readonly BlockRow[];
  readonly sound: readonly BlockRow[];
  readonly blocks: readonly StoredBlock[];
  readonly chunks: readonly KeptChunk[];
}

async function mendDatabase(db: JournalDatabase, { header, rows, sound, blocks, chunks }: Mending): Promise<void> {
  const { runId } = header;
  const damaged = rows.slice(sound.length);
  const from = endOf(sound);
  await db.transaction('rw', [db.runs, db.blocks, db.chunks, db.damaged], async () => {
    if ((await db.runs.get(runId)) === undefined) await db.runs.put(newRunRow(header, blocks));
    await db.damaged.bulkAdd(damaged.map(({ firstSeq, bytes }) => ({ runId, from: 'database' as const, firstSeq, bytes })));
    await db.blocks.bulkDelete(damaged.map((row) => [runId, row.firstSeq] as [string, number]));
    await db.blocks.bulkPut(blocks.filter((block) => block.firstSeq >= from).map((block) => ({ runId, ...block })));
    const known = new Set((await db.chunks.where('[runId+n]').between([runId, 0], [runId, Infinity]).toArray()).map((chunk) => chunk.n));
    await db.chunks.bulkPut(chunks.filter((chunk) => !known.has(chunk.n)).map((chunk) => ({ runId, ...chunk })));
  });
}

const endOf = (blocks: readonly StoredBlock[]): number => {
  const last = blocks.at(-1);
  return last === undefined ? 0 : last.firstSeq + last.count;
};
