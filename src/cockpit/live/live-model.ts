import type { Readout } from '#shared/pace/readout.ts';
import { zoneShown } from '#src/cockpit/view/zone-shown.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';

/**
 * One loop a frame: asks the session what to show and hands it to painters, which write text nodes and transforms.
 * React hears of it only when the structure of the screen changes, so that the feed costs no commit.
 */
export type Painter = (readout: Readout) => void;

export interface LiveModel {
  /** Paints at once with the latest readout, then every frame until released. */
  addPainter(painter: Painter): () => void;
  /** For `useSyncExternalStore`: the readout as it stood when the structure last changed. */
  structure(): Readout;
  subscribe(listener: () => void): () => void;
  start(): () => void;
}

export function createLiveModel(session: Pick<RunSession, 'readout' | 'subscribe'>): LiveModel {
  const painters = new Set<Painter>();
  const listeners = new Set<() => void>();
  let latest = session.readout();
  let structural = latest;
  let key = structureKey(latest);
  let told = false;

  const frame = (): void => {
    latest = session.readout();
    for (const paint of painters) paint(latest);
    const nextKey = structureKey(latest);
    if (nextKey === key && !told) return;
    key = nextKey;
    told = false;
    structural = latest;
    for (const listener of listeners) listener();
  };

  return {
    addPainter(painter) {
      painters.add(painter);
      painter(latest);
      return () => painters.delete(painter);
    },
    structure: () => structural,
    subscribe(listener) {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    start() {
      const release = session.subscribe(() => {
        told = true;
      });
      let handle = requestAnimationFrame(function loop() {
        frame();
        handle = requestAnimationFrame(loop);
      });
      return () => {
        cancelAnimationFrame(handle);
        release();
      };
    },
  };
}

/** Held so long that the release is history: the grid check is the place to type a new one. */
const LONG_HELD_S = 120;
export const heldForLong = ({ phase, toRelease }: Pick<Readout, 'phase' | 'toRelease'>): boolean =>
  phase === 'held' && toRelease !== null && toRelease < -LONG_HELD_S;

/** What decides which elements stand on the screen; figures are left out on purpose. */
export function structureKey(readout: Readout): string {
  return JSON.stringify([
    readout.phase,
    readout.release,
    readout.targetTime,
    readout.band?.side,
    readout.hold.kind,
    readout.next?.checkpoint.id,
    readout.next?.inReach,
    readout.zone === null,
    zoneShown(readout)?.name,
    heldForLong(readout),
    readout.source,
    readout.official?.source,
    readout.lastTap,
    readout.warnings,
    readout.finish === null,
    readout.finish?.stopBoardIn === null,
  ]);
}
