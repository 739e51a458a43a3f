import type { ChunkStore, OutboxRun } from '#src/storage/chunk-store.ts';
import type { UploadProgress } from '#src/storage/upload-progress.ts';
import { CHUNK_LIMIT_BYTES } from './chunk-cutter.ts';
import type { Sha256 } from './digest-chain.ts';
import type { Patience } from './patience.ts';
import { pushRun } from './push-run.ts';
import { decideRetry } from './retry-policy.ts';
import { createUploadClient, type UploadFetch } from './upload-client.ts';

/** One turn of one run: send what can be sent, decide after a failure, ask for the result of a sealed one. */
export interface AttendDeps {
  readonly store: ChunkStore;
  readonly fetch: UploadFetch;
  readonly sha256: Sha256;
  readonly patience: Patience;
  readonly chunkLimit?: number;
}

/** How often a run under way is looked at again, and storage when nothing is due. */
export const IDLE_LOOK_MS = 10_000;
const FIRST_RESULT_WAIT_MS = 500;
const LONGEST_RESULT_WAIT_MS = 60_000;

/** `later`: no answer came that settles anything; a wait is running. */
export async function attendRun(run: OutboxRun, deps: AttendDeps): Promise<'answered' | 'later'> {
  const { patience } = deps;
  patience.begin(run.runId);
  // What is written down as this turn goes on; `run` holds what was when it began.
  let { state } = run.progress;
  const say = async (change: Partial<UploadProgress>): Promise<void> => {
    await deps.store.progress(run.runId, change);
    state = change.state ?? state;
  };
  if (state !== 'safe on server') {
    const sent = await push(run, deps, say);
    if (!sent.ok) {
      const decision = decideRetry({ ...sent.error, attempt: patience.failed(run.runId) });
      if (decision.kind === 'give up') {
        await say({ state: 'blocked', blocked: { code: sent.error.code, message: decision.reason } });
        return 'answered';
      }
      // A try that never reached the server leaves a blocked run blocked; what was being sent no longer is.
      if (state !== 'blocked') await say({ state: 'on this device' });
      if (decision.kind === 'resume') patience.wake();
      else patience.wait(run.runId, decision.ms);
      return 'later';
    }
    if (sent.value === 'idle') {
      patience.wait(run.runId, IDLE_LOOK_MS);
      return 'answered';
    }
  }
  await lookForResult(run, deps, say);
  return 'answered';
}

/** With the upload grant; if the server no longer takes that, as whoever is signed in. */
async function push(run: OutboxRun, deps: AttendDeps, say: (change: Partial<UploadProgress>) => Promise<void>) {
  const as = (grant: string | null) =>
    pushRun(run, {
      store: deps.store,
      client: createUploadClient(deps.fetch, run.runId, grant),
      sha256: deps.sha256,
      say,
      progressed: () => deps.patience.progressed(run.runId),
      chunkLimit: deps.chunkLimit ?? CHUNK_LIMIT_BYTES,
    });
  const grant = await deps.store.grant(run.header.attemptId);
  const sent = await as(grant);
  return !sent.ok && sent.error.code === 'GRANT_INVALID' && grant !== null ? as(null) : sent;
}

/** The run is safe whatever comes of this: a refusal only means that nobody who may read it is signed in. */
async function lookForResult(
  run: OutboxRun,
  { fetch, patience }: AttendDeps,
  say: (change: Partial<UploadProgress>) => Promise<void>,
): Promise<void> {
  const status = await createUploadClient(fetch, run.runId, null).status();
  if (status.ok && status.value.derived) return say({ derived: true });
  const attempt = patience.failed(run.runId);
  if (!status.ok && decideRetry({ ...status.error, attempt }).kind === 'give up') return;
  patience.wait(run.runId, Math.min(LONGEST_RESULT_WAIT_MS, FIRST_RESULT_WAIT_MS * 2 ** Math.min(attempt - 1, 10)));
}
