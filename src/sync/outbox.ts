import type { Result } from '#shared/result.ts';
import type { ChunkStore, OutboxRun } from '#src/storage/chunk-store.ts';
import { CHUNK_LIMIT_BYTES } from './chunk-cutter.ts';
import type { Sha256 } from './digest-chain.ts';
import { createPatience, type Patience } from './patience.ts';
import { type PushOutcome, pushRun } from './push-run.ts';
import { decideRetry } from './retry-policy.ts';
import { createUploadClient, type UploadFailure, type UploadFetch } from './upload-client.ts';

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

/** How often storage is looked at when nothing is due: bounds the wait for a run that ended unannounced. */
export const IDLE_LOOK_MS = 10_000;
const LONGEST_RESULT_WAIT_MS = 60_000;

export function createOutbox(deps: OutboxDeps): Outbox {
  const patience: Patience = createPatience(deps.delay);
  const asked = new Set<string>();
  let askedAll = true; // a new page gives every blocked run one more try
  let stopped = false;

  async function attend(run: OutboxRun): Promise<void> {
    patience.begin(run.runId);
    const outcome = await push(run, deps, () => patience.progressed(run.runId));
    if (!outcome.ok) return failed(run, outcome.error);
    if (outcome.value === 'idle') patience.wait(run.runId, IDLE_LOOK_MS);
    if (outcome.value === 'waiting') {
      const attempt = patience.failed(run.runId);
      patience.wait(run.runId, Math.min(LONGEST_RESULT_WAIT_MS, 250 * 2 ** Math.min(attempt, 10)));
    }
  }

  async function failed(run: OutboxRun, failure: UploadFailure): Promise<void> {
    const decision = decideRetry({ ...failure, attempt: patience.failed(run.runId) });
    if (decision.kind === 'resume') return patience.wake();
    if (decision.kind === 'wait') patience.wait(run.runId, decision.ms);
    if (run.progress.state === 'safe on server') return;
    if (decision.kind === 'give up') {
      await deps.store.progress(run.runId, { state: 'blocked', blocked: { code: failure.code, message: decision.reason } });
    } else if (run.progress.state !== 'blocked') {
      await deps.store.progress(run.runId, { state: 'on this device' });
    }
  }

  async function pass(): Promise<void> {
    const all = askedAll;
    askedAll = false;
    for (const run of await deps.store.pending()) {
      if (stopped) return;
      const wanted = asked.delete(run.runId) || all;
      if (!maySend(run) || (run.progress.state === 'blocked' ? !wanted : !patience.due(run.runId))) continue;
      await attend(run).catch((error: unknown) => {
        deps.report(error);
        patience.wait(run.runId, IDLE_LOOK_MS);
      });
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

/** With the upload grant; if the server no longer takes that, as whoever is signed in. */
async function push(run: OutboxRun, deps: OutboxDeps, progressed: () => void): Promise<Result<PushOutcome, UploadFailure>> {
  const attempt = (grant: string | null) =>
    pushRun(run, {
      store: deps.store,
      client: createUploadClient(deps.fetch, run.runId, grant),
      sha256: deps.sha256,
      progressed,
      chunkLimit: deps.chunkLimit ?? CHUNK_LIMIT_BYTES,
    });
  const grant = await deps.store.grant(run.header.attemptId);
  const outcome = await attempt(grant);
  return !outcome.ok && outcome.error.code === 'GRANT_INVALID' && grant !== null ? attempt(null) : outcome;
}

/** No data leaves a car under way unless its class permits a data link. */
function maySend(run: OutboxRun): boolean {
  return run.ended || run.header.pack.raceClass.aids.dataLink;
}
