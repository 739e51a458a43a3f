import type { ChunkStore } from '#src/storage/chunk-store.ts';
import { webLocks } from '#src/storage/exclusive-lock.ts';
import { subtleSha256 } from './digest-chain.ts';
import { createOutbox, type Outbox } from './outbox.ts';
import type { UploadFetch } from './upload-client.ts';

/**
 * Starts sending from this page, whichever page it is. Of all open pages one sends (Web Lock); when it goes, the next
 * takes over. Any page may ask for a try through the channel, whoever holds the lock.
 */
export interface OutboxHandle {
  /** A run ended, or the connection may be back: try now. */
  wake(): void;
  /** One more try of the blocked runs, or of one: after a sign-in, or because the person asks. */
  retryBlocked(runId?: string): void;
  stop(): void;
}

type Request = { readonly kind: 'wake' } | { readonly kind: 'retry'; readonly runId: string | null };

export const OUTBOX_LOCK = 'evenline-outbox';
const CHANNEL = 'evenline-outbox';
/** A call that hangs longer is cut; the next try asks the server what arrived. */
const CALL_TIMEOUT_MS = 60_000;

export function startOutbox(store: ChunkStore): OutboxHandle {
  const stopping = new AbortController();
  const channel = new BroadcastChannel(CHANNEL);
  let outbox: Outbox | null = null;

  const obey = (request: Request): void => {
    if (request.kind === 'wake') outbox?.wake();
    else outbox?.retryBlocked(request.runId ?? undefined);
  };
  const ask = (request: Request): void => {
    obey(request);
    channel.postMessage(request);
  };
  channel.onmessage = (event: MessageEvent<Request>) => obey(event.data);

  const wake = (): void => obey({ kind: 'wake' });
  addEventListener('online', wake);
  document.addEventListener('visibilitychange', wake);
  void sendWhileHolding(store, stopping.signal, (next) => {
    outbox = next;
  });

  return {
    wake: () => ask({ kind: 'wake' }),
    retryBlocked: (runId) => ask({ kind: 'retry', runId: runId ?? null }),
    stop: () => {
      removeEventListener('online', wake);
      document.removeEventListener('visibilitychange', wake);
      channel.close();
      stopping.abort();
      outbox?.stop();
    },
  };
}

async function sendWhileHolding(store: ChunkStore, signal: AbortSignal, became: (outbox: Outbox | null) => void): Promise<void> {
  const release = await webLocks.wait(OUTBOX_LOCK, signal);
  if (release === null) return;
  try {
    if (signal.aborted) return;
    const outbox = createOutbox({ store, fetch: timedFetch, sha256: subtleSha256, delay, report: (error) => console.error(error) });
    became(outbox);
    await outbox.run();
  } finally {
    became(null);
    release();
  }
}

const timedFetch: UploadFetch = (url, init) =>
  fetch(url, { ...init, credentials: 'same-origin', signal: AbortSignal.timeout(CALL_TIMEOUT_MS) });

const delay = (ms: number): Promise<void> =>
  new Promise((resolve) => {
    setTimeout(resolve, ms);
  });
