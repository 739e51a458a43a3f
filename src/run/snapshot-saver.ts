import { ENGINE_VERSION, snapshot } from '#shared/pace/run.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { JournalQueue } from './journal-queue.ts';
import type { KnownRun } from './known-run.ts';
import type { RunEnvironment } from './run-environment.ts';

const EVERY_MS = 60_000;

interface SaverOptions {
  readonly run: KnownRun;
  readonly store: JournalStore;
  readonly queue: JournalQueue;
  readonly flush: () => void;
  readonly clocks: RunEnvironment['clocks'];
}

/** A copy of the state once a minute, so that a page that comes back need not fold everything again. */
export function createSnapshotSaver({ run, store, queue, flush, clocks }: SaverOptions): { look(): void } {
  let last = clocks.mono();
  return {
    look() {
      if (clocks.mono() - last < EVERY_MS) return;
      last = clocks.mono();
      const saved = { engine: ENGINE_VERSION, seq: run.nextSeq, state: snapshot(run.state) };
      flush();
      // Never of more than the journal holds: what is lost with the page must not live on in a snapshot.
      queue.afterCommit(saved.seq, () => void store.putSnapshot(run.header.runId, saved).catch(() => undefined));
    },
  };
}
