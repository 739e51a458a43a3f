import type { Readout } from '#shared/pace/readout.ts';
import { zoneShown } from '#src/cockpit/view/zone-shown.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';

/**
 * How often a painter is called: heights and fills every frame, figures as often as an eye can read them. Text laid out
 * anew sixty times a second is what a slow tablet has no time for.
 */
export type Pace = 'every frame' | 'figures';
const FIGURES_EVERY_MS = 80;

/**
 * One loop a frame: asks the session what to show and hands it to painters, which write text nodes and transforms.
 * React hears of it only when the structure of the screen changes, so that the feed costs no commit.
 */
export type Painter = (readout: Readout) => void;

export interface LiveModel {
  /** Paints at once with the latest readout, then at its pace, and whenever the structure changes, until released. */
  addPainter(painter: Painter, pace: Pace): () => void;
  /** For `useSyncExternalStore`: the readout as it stood when the structure last changed. */
  structure(): Readout;
  subscribe(listener: () => void): () => void;
  start(): () => void;
}

export function createLiveModel(session: Pick<RunSession, 'readout' | 'subscribe'>): LiveModel {
  const painters: Readonly<Record<Pace, Set<Painter>>> = { 'every frame': new Set(), figures: new Set() };
  const listeners = new Set<() => void>();
  let latest = session.readout();
  let structural = latest;
  let key = structureKey(latest);
  let told = false;
  let figuresDue = 0;

  const frame = (time: number): void => {
    latest = session.readout();
    const nextKey = structureKey(latest);
    const changed = told || nextKey !== key;
    for (const paint of painters['every frame']) paint(latest);
    if (changed || time >= figuresDue) {
      figuresDue = time + FIGURES_EVERY_MS;
      for (const paint of painters.figures) paint(latest);
    }
    if (!changed) return;
    key = nextKey;
    told = false;
    structural = latest;
    for (const listener of listeners) listener();
  };

  return {
    addPainter(painter, pace) {
      painters[pace].add(painter);
      painter(latest);
      return () => painters[pace].delete(painter);
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
      let handle = requestAnimationFrame(function loop(time) {
        frame(time);
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
    readout.elapsed === null,
    readout.targetTime,
    readout.band?.side,
    readout.hold.kind,
    readout.noReturn === null,
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
