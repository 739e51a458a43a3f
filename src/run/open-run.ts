import type { Pack } from '#shared/course/pack.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { RunEnvironment } from './run-environment.ts';

export interface OpenRunOptions {
  readonly store: JournalStore;
  readonly pack: Pack;
  /** SHA-256 of the pack's canonical JSON, hex. */
  readonly packDigest: string;
  readonly deviceId: string;
  readonly appVersion: string;
  /**
   * `open or new`: the attempt's run on this device that was not ended, else a new one. `new`: always a new one (a rerun).
   * `{ runId }`: exactly that run, ended or not.
   */
  readonly which: 'open or new' | 'new' | { readonly runId: string };
  /** For a new run only; a resumed one keeps its own. Rate above 1 only with `practice`. */
  readonly clockRate?: number;
  /** True when the simulator drives: such a run never counts. */
  readonly practice?: boolean;
  /** One GET /api/time; null or a rejection when there is no connection. Without it the official clock is the wall's. */
  readonly exchangeTime?: () => Promise<{ readonly t2: number; readonly t3: number } | null>;
  /** Clocks, timers, locks and channels of the browser, replaced in tests. */
  readonly environment?: RunEnvironment;
}

export interface OpenRunFailure {
  readonly code: 'unknown-run' | 'storage' | 'damaged' | 'rate' | 'pack';
  readonly message: string;
}
