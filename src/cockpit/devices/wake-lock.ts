/** Keeps the screen on while asked; the browser lets go when the page is hidden or power is low, so it is asked again. */
export type WakeState = 'on' | 'refused' | 'unsupported' | 'off';

let wanted = 0;
let sentinel: WakeLockSentinel | null = null;
let state: WakeState = 'off';
const listeners = new Set<() => void>();

export const wakeState = (): WakeState => state;

export function subscribeToWake(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

function become(next: WakeState): void {
  if (state === next) return;
  state = next;
  for (const listener of listeners) listener();
}

async function acquire(): Promise<void> {
  if (wanted === 0 || document.visibilityState !== 'visible' || (sentinel !== null && !sentinel.released)) return;
  if (!('wakeLock' in navigator)) return become('unsupported');
  try {
    sentinel = await navigator.wakeLock.request('screen');
    sentinel.addEventListener('release', () => {
      if (wanted > 0) become('refused');
    });
    become('on');
  } catch {
    become('refused');
  }
}

/** Held until the returned release is called. */
export function keepScreenOn(): () => void {
  wanted += 1;
  const again = () => void acquire();
  document.addEventListener('visibilitychange', again);
  // A refusal for low power may pass; a touch or a key is a good moment to ask again.
  document.addEventListener('pointerdown', again);
  again();
  return () => {
    wanted -= 1;
    document.removeEventListener('visibilitychange', again);
    document.removeEventListener('pointerdown', again);
    if (wanted === 0) {
      void sentinel?.release();
      sentinel = null;
      become('off');
    }
  };
}
