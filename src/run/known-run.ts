import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { begin, ENGINE_VERSION, type RunState, snapshot, step } from '#shared/pace/run.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import type { JournalStore, StoredRun } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { type BoxMemory, createBoxMemory } from './box-bridge.ts';
import { followLife, type LastLife, NO_LIFE } from './epoch.ts';
import type { OpenRunFailure } from './open-run.ts';

/** A run as far as it is known: the fold of its journal, and what the next life of the page needs to go on. */
export interface KnownRun {
  readonly header: RunHeader;
  readonly state: RunState;
  nextSeq: number;
  life: LastLife;
  readonly box: BoxMemory;
  recovered: StoredRun['recovered'] | null;
}

export function newKnownRun(header: RunHeader): KnownRun {
  return { header, state: begin(header.pack), nextSeq: 0, life: NO_LIFE, box: createBoxMemory(), recovered: null };
}

/** The one way an observation enters a run, whoever saw it first. */
export function takeObservation(run: KnownRun, observation: Journalled): void {
  step(run.state, observation);
  remember(run, observation);
}

function remember(run: KnownRun, observation: Journalled): void {
  run.nextSeq = observation.seq + 1;
  run.life = followLife(run.life, observation);
  const pulse = observation.type === 'pulse.v1' ? (observation as Extract<Journalled, { type: 'pulse.v1' }>) : null;
  if (pulse !== null && typeof pulse.boxUs === 'number') run.box.take(pulse as never);
}

/** From storage: the snapshot where it fits and the blocks after it, else the fold of everything. */
export async function restoreRun(store: JournalStore, runId: string): Promise<Result<KnownRun, OpenRunFailure>> {
  const stored = await store.readRun(runId);
  if (!stored.ok) return fail({ code: stored.error.code === 'unknown-run' ? 'unknown-run' : 'storage', message: stored.error.message });
  const { header, blocks, recovered } = stored.value;
  const saved = await usableSnapshot(store, runId, blocks);
  const run: KnownRun = { ...newKnownRun(header), recovered };
  const from = saved === null ? 0 : saved.seq;
  const known: KnownRun = saved === null ? run : { ...run, state: snapshot(saved.state) };
  for (const block of blocks) {
    const read = decodeBlock(block.bytes);
    if (!read.ok) return fail({ code: 'damaged', message: read.error.message });
    for (const observation of read.value.observations) {
      if (observation.seq < from) remember(known, observation);
      else takeObservation(known, observation);
    }
  }
  return ok(known);
}

/** Of this very engine, and of nothing that the journal does not hold: what was never committed did not happen. */
async function usableSnapshot(
  store: JournalStore,
  runId: string,
  blocks: readonly StoredBlock[],
): Promise<{ seq: number; state: RunState } | null> {
  const saved = await store.getSnapshot(runId).catch(() => null);
  const last = blocks.at(-1);
  const end = last === undefined ? 0 : last.firstSeq + last.count;
  if (saved === null || saved.engine !== ENGINE_VERSION || saved.seq > end) return null;
  return { seq: saved.seq, state: saved.state as RunState };
}
