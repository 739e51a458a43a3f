import { type ExclusiveLocks, webLocks } from '#src/storage/exclusive-lock.ts';
import { type DeviceClocks, deviceClocks } from './clock.ts';

/** What a RunSession takes from the browser, so that tests can hold every part of it in their hands. */
export interface RunEnvironment {
  readonly clocks: DeviceClocks;
  readonly locks: ExclusiveLocks;
  /** Calls `tick` about every `ms` until the returned function is called. May be late or rare in a hidden page. */
  every(ms: number, tick: () => void): () => void;
  /** Calls once after `ms`, unless the returned function is called first. */
  after(ms: number, then: () => void): () => void;
  /** Calls once before the next paint, or soon where nothing is painted. */
  nextFrame(paint: () => void): void;
  /** Calls whenever the page is hidden or left: it may be killed without another word. */
  onHide(hidden: () => void): () => void;
  channel(name: string): RunChannel;
  newId(): string;
}

/** The part of BroadcastChannel that is used. */
export interface RunChannel {
  postMessage(message: unknown): void;
  onmessage: ((event: MessageEvent) => void) | null;
  close(): void;
}

/** A hidden window paints nothing and would otherwise never hear of a change. */
const HIDDEN_FRAME_MS = 250;

export function browserEnvironment(newId: () => string): RunEnvironment {
  return {
    clocks: deviceClocks,
    locks: webLocks,
    every: (ms, tick) => {
      const timer = setInterval(tick, ms);
      return () => clearInterval(timer);
    },
    after: (ms, then) => {
      const timer = setTimeout(then, ms);
      return () => clearTimeout(timer);
    },
    nextFrame: (paint) => {
      let due = true;
      const once = (): void => {
        if (due) paint();
        due = false;
      };
      requestAnimationFrame(once);
      setTimeout(once, HIDDEN_FRAME_MS);
    },
    onHide: (hidden) => {
      const ifHidden = (): void => {
        if (document.visibilityState === 'hidden') hidden();
      };
      document.addEventListener('visibilitychange', ifHidden);
      addEventListener('pagehide', hidden);
      return () => {
        document.removeEventListener('visibilitychange', ifHidden);
        removeEventListener('pagehide', hidden);
      };
    },
    channel: (name) => new BroadcastChannel(name),
    newId,
  };
}
