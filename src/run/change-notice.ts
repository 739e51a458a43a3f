import type { Readout } from '#shared/pace/readout.ts';
import type { RunEnvironment } from './run-environment.ts';
import type { RunStatus } from './run-session-contract.ts';

/** Tells listeners that something other than a live figure changed: at most once a frame, and only if it did. */
export interface ChangeNotice {
  /** Looks whether there is anything to tell. Cheap enough for every act and four times a second. */
  look(): void;
  subscribe(listener: () => void): () => void;
}

export function createChangeNotice(keyNow: () => string, nextFrame: RunEnvironment['nextFrame']): ChangeNotice {
  const listeners = new Set<() => void>();
  let told = keyNow();
  let waiting = false;
  const tell = (): void => {
    waiting = false;
    for (const listener of [...listeners]) listener();
  };
  return {
    look() {
      const key = keyNow();
      if (key === told) return;
      told = key;
      if (!waiting) nextFrame(tell);
      waiting = true;
    },
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}

/** Everything a screen is built from; figures that move with the car are left out on purpose. */
export function changeKey(readout: Readout, status: RunStatus, role: string, settings: number): string {
  const { sensor, storage } = status;
  return JSON.stringify([
    role,
    settings,
    readout.phase,
    readout.release,
    readout.targetTime,
    readout.official?.source,
    readout.next?.checkpoint.id,
    readout.next?.inReach,
    readout.source,
    readout.lastTap,
    readout.warnings,
    readout.finish === null,
    [sensor?.name, sensor?.state, sensor?.failure],
    [storage.state, storage.message, storage.recovered],
  ]);
}
