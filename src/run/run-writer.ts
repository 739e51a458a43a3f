import type { Journalled } from '#shared/journal/block.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { createBlockMaker } from './block-maker.ts';
import type { SessionClock } from './clock.ts';
import { createDeviceWatch } from './device-watch.ts';
import { epochNow } from './epoch.ts';
import { finishShown } from './finish-shown.ts';
import { createGapWatch } from './gap-watch.ts';
import { createJournalQueue, type JournalQueue } from './journal-queue.ts';
import type { KnownRun } from './known-run.ts';
import { createNumbering } from './numbering.ts';
import type { RunEnvironment } from './run-environment.ts';
import { createSnapshotSaver } from './snapshot-saver.ts';

/** The one who gives out seq: whatever happens goes into the state and into the journal here, in this order, and nowhere else. */
export interface RunWriter {
  /** From sensors, in order of arrival. */
  observe(observations: readonly NewObservation[]): void;
  /**
   * An act of a person or of the page: journalled at once. `make` is asked when the clock is as right as it can be.
   * @returns Its seq; null once the run has ended, for a journal that was closed may already be sealed.
   */
  act(make: () => NewObservation): number | null;
  readonly queue: JournalQueue;
  /** Everything numbered that storage has not acknowledged, for a window that begins to follow. */
  uncommitted(): readonly Journalled[];
  close(): Promise<void>;
}

export interface WriterOptions {
  readonly run: KnownRun;
  readonly clock: SessionClock;
  readonly store: JournalStore;
  readonly environment: RunEnvironment;
  /** What carried the clock over to this life of the page. */
  readonly bridge: { readonly by: 'first' | 'wall' | 'page'; readonly uncertaintyMs: number };
  /** Numbered before this life began, seen by this window and never committed. */
  readonly leftOver: readonly Journalled[];
  readonly numbered: (observations: readonly Journalled[]) => void;
  readonly changed: () => void;
}

const TICK_MS = 250;
/** Pulses after a gap are held back for so long, to find the least delay among them. */
const SETTLE_MS = 250;

export function createRunWriter(options: WriterOptions): RunWriter {
  const { run, clock, store, environment, bridge, leftOver, numbered, changed } = options;
  const { clocks, every, after } = environment;
  const { runId } = run.header;
  const from = leftOver[0]?.seq ?? run.nextSeq;
  const queue = createJournalQueue({ runId, store: creating(store, run.header), environment, from, changed });
  const blocks = createBlockMaker((block) => queue.push(block), environment);
  const { put, putAgain, uncommitted } = createNumbering(run, blocks, queue, numbered);
  const gap = createGapWatch(clock, run.box, () => run.life.n);
  const device = createDeviceWatch(clock);
  const snapshots = createSnapshotSaver({ run, store, queue, flush: blocks.flush, clocks });
  let cancelSettling: (() => void) | null = null;

  const settle = (): void => {
    cancelSettling?.();
    cancelSettling = null;
    put(gap.settle());
  };
  /** Before anything else is numbered: after a sleep the instants of what follows are wrong until the box is heard. */
  const watch = (): void => {
    const { pair, apart } = device.look();
    if (apart) gap.arm(false);
    if (pair !== null) put([pair]);
  };
  /** Before the run can be ended: what the crew was shown at the line. */
  const noteFinish = (): void => put(finishShown(run.state, clock.now()));
  const act: RunWriter['act'] = (make) => {
    if (run.state.acts.ended !== null) return null;
    watch();
    settle();
    noteFinish();
    const seq = run.nextSeq;
    put([make()]);
    changed();
    return seq;
  };
  const tick = (): void => {
    watch();
    noteFinish();
    snapshots.look();
    changed();
  };

  putAgain(leftOver);
  act(() => epochNow(clock, run.life.n + 1, bridge.by, bridge.uncertaintyMs));
  if (bridge.by !== 'first') gap.arm(true);
  const stopTicking = every(TICK_MS, tick);
  const stopHiding = environment.onHide(() => {
    settle();
    blocks.flush();
  });
  return {
    queue,
    act,
    uncommitted,
    observe(observations) {
      watch();
      if (!gap.hold(observations)) return put(observations);
      cancelSettling ??= after(SETTLE_MS, settle);
    },
    async close() {
      stopTicking();
      stopHiding();
      settle();
      blocks.flush();
      await queue.drained();
      queue.stop();
      await store.releaseRun(runId).catch(() => undefined);
    },
  };
}

/** A run whose creation found no room, or that storage lost, is created as soon as there is: the run did not wait for it. */
function creating(store: JournalStore, header: RunHeader): Pick<JournalStore, 'append'> {
  return {
    append: async (runId, block) => {
      const first = await store.append(runId, block);
      if (first.ok || first.error.code !== 'unknown-run') return first;
      const created = await store.createRun(header);
      return created.ok ? store.append(runId, block) : created;
    },
  };
}
