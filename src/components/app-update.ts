import type { Workbox } from 'workbox-window';

/**
 * A newer Evenline waits until a person asks for it, and never while a run is open in any window of this device.
 * Owns the service worker's registration; the prompt is drawn by `update-prompt.tsx`.
 */
export type UpdateState = 'none' | 'waiting' | 'missing part' | 'held by a run';

const RUN_OPEN_CHANNEL = 'evenline.run-open';
/** Windows answer from memory within a frame or two; a silent quarter second means that no run is open. */
const ANSWER_WITHIN_MS = 250;

let state: UpdateState = 'none';
let workbox: Workbox | null = null;
let runsOpenHere = 0;
const listeners = new Set<() => void>();

function become(next: UpdateState): void {
  state = next;
  for (const listener of listeners) listener();
}

export const updateState = (): UpdateState => state;

export function subscribeToUpdate(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** While held, this window neither reloads nor lets another window bring the newer version in. */
export function holdUpdates(): () => void {
  runsOpenHere += 1;
  const channel = new BroadcastChannel(RUN_OPEN_CHANNEL);
  channel.onmessage = (event) => {
    if (event.data === 'any run open?') channel.postMessage('run open');
  };
  return () => {
    runsOpenHere -= 1;
    channel.close();
  };
}

/** The person asked for the newer version. */
export async function acceptUpdate(): Promise<void> {
  if (runsOpenHere > 0 || (await anotherWindowHasRunOpen())) {
    become('held by a run');
    return;
  }
  if (state === 'missing part' || workbox === null) location.reload();
  else workbox.messageSkipWaiting();
}

function anotherWindowHasRunOpen(): Promise<boolean> {
  return new Promise((resolve) => {
    const channel = new BroadcastChannel(RUN_OPEN_CHANNEL);
    const answer = (open: boolean) => {
      clearTimeout(timer);
      channel.close();
      resolve(open);
    };
    const timer = setTimeout(() => answer(false), ANSWER_WITHIN_MS);
    channel.onmessage = (event) => {
      if (event.data === 'run open') answer(true);
    };
    channel.postMessage('any run open?');
  });
}

export function registerServiceWorker(): void {
  // A file of the old version is gone from the server: the way out is the newer version, when the person says so.
  addEventListener('vite:preloadError', (event) => {
    event.preventDefault();
    become('missing part');
    void workbox?.update();
  });
  if (!import.meta.env.PROD || !isSecureContext) return;
  // Refused registration (private window, storage off) leaves a page that works online; the grid check reports storage.
  register().catch((reason: unknown) => console.warn('service worker not registered', reason));
}

/** Fetched after the page's own parts: nothing on the first screen waits for it. */
async function register(): Promise<void> {
  const parts = await import('workbox-window');
  workbox = new parts.Workbox('/sw.js');
  workbox.addEventListener('waiting', () => become('waiting'));
  workbox.addEventListener('controlling', (event) => {
    if (event.isUpdate === true && runsOpenHere === 0) location.reload();
  });
  await workbox.register();
}
