import { checkBlock } from '#shared/journal/block.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { ok, type Result } from '#shared/result.ts';
import { guarded } from './guarded.ts';
import type { JournalDatabase } from './journal-database.ts';
import type { Mirrors } from './mirrors.ts';
import { endsRun, newRunRow } from './run-row.ts';
import { storageFail } from './storage-fault.ts';
import type { StorageFailure, StoredBlock } from './stored-block.ts';

/** Writes of one journal: database first, strictly, then the mirror. One at a time and in order: the worker sees to that. */

export async function createRun(db: JournalDatabase, mirrors: Mirrors, header: RunHeader): Promise<Result<void, StorageFailure>> {
  const put = await guarded(db, () =>
    db.transaction('rw', db.runs, async () => {
      const known = await db.runs.get(header.runId);
      if (known !== undefined) return known.header.packDigest === header.packDigest && known.header.deviceId === header.deviceId;
      await db.runs.add(newRunRow(header));
      return true;
    }),
  );
  if (!put.ok) return put;
  if (!put.value) return storageFail('out-of-order', 'another run has this name');
  await mirrors.level(header.runId);
  return ok(undefined);
}

type Verdict = 'stored' | 'unknown-run' | { readonly expected: number };

/** A block the database refuses because it fell behind (wiped, or restored shorter) is tried again after healing from the mirror. */
export async function appendBlock(
  db: JournalDatabase,
  mirrors: Mirrors,
  runId: string,
  block: StoredBlock,
): Promise<Result<void, StorageFailure>> {
  const head = checkBlock(block.bytes);
  const whole = head.ok && head.value.nextOffset === block.bytes.byteLength;
  if (!whole || head.value.firstSeq !== block.firstSeq || head.value.count !== block.count) return storageFail('corrupt');
  let put = await guarded(db, () => putBlock(db, runId, block));
  if (put.ok && put.value !== 'stored') {
    await mirrors.level(runId);
    put = await guarded(db, () => putBlock(db, runId, block));
  }
  if (!put.ok) {
    // The mirror takes it all the same: should the database never recover, the next start heals it from there.
    await mirrors.append(runId, block);
    return put;
  }
  if (put.value === 'unknown-run') return storageFail('unknown-run');
  if (put.value !== 'stored') return storageFail('out-of-order', `observation ${block.firstSeq} where ${put.value.expected} follows`);
  await mirrors.append(runId, block);
  return ok(undefined);
}

function putBlock(db: JournalDatabase, runId: string, block: StoredBlock): Promise<Verdict> {
  return db.transaction('rw', [db.runs, db.blocks], async () => {
    if (!(await db.hasRun(runId))) return 'unknown-run';
    const expected = await db.nextSeq(runId);
    if (block.firstSeq < expected) {
      const held = await db.blocks.get([runId, block.firstSeq]);
      return held !== undefined && sameBytes(held.bytes, block.bytes) ? 'stored' : { expected };
    }
    if (block.firstSeq > expected) return { expected };
    await db.blocks.add({ runId, firstSeq: block.firstSeq, count: block.count, bytes: block.bytes });
    if (endsRun(block)) await db.runs.update(runId, { ended: true });
    return 'stored';
  });
}

function sameBytes(a: Uint8Array, b: Uint8Array): boolean {
  return a.byteLength === b.byteLength && a.every((byte, i) => byte === b[i]);
}
