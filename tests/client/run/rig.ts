import { vi } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import type { OpenRunOptions } from '#src/run/open-run.ts';
import { openRunSession } from '#src/run/run-session.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { Device, type DeviceWindow, must } from '#tests/client/storage/device.ts';
import { PACK } from '#tests/unit/journal/header.ts';
import { settled, type WindowOf, World } from './world.ts';

/** Minutes of driving at 50 lines a second, every block through the database: some seconds on a busy machine. */
vi.setConfig({ testTimeout: 30_000 });

/** A tablet with its storage, its clocks and its windows. */
export class Rig {
  readonly world = new World();
  readonly device = new Device();
  readonly pack: Pack;
  private origins = 0;

  /** The pack's release lies `releaseInMs` after now, by the tablet's wall clock. */
  constructor(releaseInMs: number, change: (pack: Pack) => Pack = (pack) => pack) {
    const releaseMs = this.world.wall() + releaseInMs;
    this.pack = change({ ...PACK, attempt: { ...PACK.attempt, releaseMs } });
  }

  async open(which: OpenRunOptions['which'], more: Partial<OpenRunOptions> = {}): Promise<OpenedWindow> {
    const window = this.world.window();
    const storage = await this.device.window();
    // Every page has a monotonic clock with an origin of its own.
    const originMs = 1000 + 137.25 * this.origins++;
    const opened = openRunSession({
      store: storage.store,
      pack: this.pack,
      packDigest: 'ab'.repeat(32),
      deviceId: 'tablet-1',
      appVersion: '0.1.0',
      which,
      environment: window.environment(originMs),
      ...more,
    });
    const session = must(await opened);
    await settled();
    return {
      session,
      window,
      storage,
      originMs,
      kill: () => {
        window.kill();
        storage.kill();
      },
    };
  }

  /** What a new window would find. */
  async journal(runId: string): Promise<readonly Journalled[]> {
    const storage = await this.device.window();
    const run = must(await storage.store.readRun(runId));
    storage.kill();
    return run.blocks.flatMap((block) => must(decodeBlock(block.bytes)).observations);
  }
}

export interface OpenedWindow {
  readonly session: RunSession;
  readonly window: WindowOf;
  readonly storage: DeviceWindow;
  readonly originMs: number;
  /** The page is gone, without another word. */
  kill(): void;
}

/** The store with some of its calls replaced. */
export const withCalls = (store: JournalStore, calls: Partial<JournalStore>): JournalStore => ({ ...store, ...calls });
