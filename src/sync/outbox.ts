import type { ChunkStore, OutboxRun } from '#src/storage/chunk-store.ts';
import { attendRun, IDLE_LOOK_MS } from './attend-run.ts';
import type { Sha256 } from './digest-chain.ts';
import { createPatience } from './patience.ts';
import type { UploadFetch } from './upload-client.ts';

/**
 * Brings this device's runs to the server, one run and one chunk at a time, from whatever page is open. One sender on
 * the device (the caller holds the Web Lock). Deletes nothing. No clock is read: waiting is by timers alone, so a
 * stepped clock changes nothing.
 */
export interface Outbox {
  /** Works until `stop`; resolves then. */
  run(): Promise<void>;
  /** Something changed (online again, a run ended): try everything that waits, at once. */
  wake(): void;
  /** The person asks, or somebody signed in: one more try of the blocked runs (or of one). */
  retryBlocked(runId?: string): void;
  stop(): void;
}

export interface OutboxDeps {
  readonly store: ChunkStore;
  readonly fetch: UploadFetch;
  readonly sha256: Sha256;
  /** Resolves after that long; never early. */
  readonly delay: (ms: number) => Promise<void>;
  /** A bug or a failing storage: said aloud, and tried again later. */
  readonly report: (error: unknown) => void;
  readonly chunkLimit?: number;
}

export function createOutbox(deps: OutboxDeps): Outbox {
  const patience = createPatience(deps.delay);
  const asked = new Set<string>();
  let askedAll = true; // a new page gives every blocked run one more try
  let stopped = false;

  async function pass(): Promise<void> {
    const all = askedAll;
    askedAll = false;
    for (const run of await deps.store.pending()) {
      if (stopped) return;
      const blocked = run.progress.state === 'blocked';
      if (blocked && all) asked.add(run.runId);
      if (!maySend(run) || !patience.due(run.runId) || (blocked && !asked.has(run.runId))) continue;
      // Taken back before the try, so that one asked for meanwhile is not lost.
      asked.delete(run.runId);
      if (!(await attend(run)) && blocked) asked.add(run.runId);
    }
  }

  /** False when it has to be tried again later. */
  async function attend(run: OutboxRun): Promise<boolean> {
    try {
      return (await attendRun(run, { ...deps, patience })) === 'answered';
    } catch (error) {
      deps.report(error);
      patience.wait(run.runId, IDLE_LOOK_MS);
      return false;
    }
  }

  /** A page that died while sending left 'sending' behind; nobody sends now. */
  async function setRecordStraight(): Promise<void> {
    for (const run of await deps.store.pending()) {
      if (run.progress.state === 'sending') await deps.store.progress(run.runId, { state: 'on this device' });
    }
  }

  return {
    run: async () => {
      await setRecordStraight().catch(deps.report);
      while (!stopped) {
        const woken = patience.nextWake();
        await pass().catch(deps.report);
        if (!stopped) await Promise.race([woken, deps.delay(IDLE_LOOK_MS)]);
      }
    },
    wake: patience.wake,
    retryBlocked: (runId) => {
      if (runId === undefined) askedAll = true;
      else asked.add(runId);
      patience.wake();
    },
    stop: () => {
      stopped = true;
      patience.wake();
    },
  };
}

/** No data leaves a car under way unless its class permits a data link. */
function maySend(run: OutboxRun): boolean {
  return run.ended || run.header.pack.raceClass.aids.dataLink;
}
