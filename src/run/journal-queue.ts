import type { JournalStore } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import type { RunEnvironment } from './run-environment.ts';
import type { RunStatus } from './run-session-contract.ts';

/**
 * Blocks on their way to storage, in order, in memory until each is acknowledged. A store that fails stops neither engine nor
 * display: the queue waits and tries again for as long as the page lives.
 */
export interface JournalQueue {
  push(block: StoredBlock): void;
  /** Every seq below this is committed. */
  readonly committed: number;
  waiting(): readonly StoredBlock[];
  status(): Pick<RunStatus['storage'], 'state' | 'pending' | 'message'>;
  /** Calls once everything below `seq` is committed. */
  afterCommit(seq: number, then: () => void): void;
  /** Resolves when nothing waits any more, or when storage refuses: then the rest is kept but nobody should wait for it. */
  drained(): Promise<void>;
  /** Nothing is sent after this. */
  stop(): void;
}

/** Waiting longer than this is worth showing; a commit takes some milliseconds. */
const SLOW_MS = 1000;
const PAUSES_MS = [250, 500, 1000, 2000, 5000] as const;

interface QueueOptions {
  readonly runId: string;
  readonly store: Pick<JournalStore, 'append'>;
  readonly environment: Pick<RunEnvironment, 'clocks' | 'after'>;
  /** First seq that is not committed yet. */
  readonly from: number;
  readonly changed: () => void;
}

export function createJournalQueue({ runId, store, environment, from, changed }: QueueOptions): JournalQueue {
  const { clocks, after } = environment;
  const waiting: { readonly block: StoredBlock; readonly since: number }[] = [];
  const afterwards: { readonly seq: number; readonly then: () => void }[] = [];
  let idle: (() => void)[] = [];
  let committed = from;
  let sending = false;
  let failures = 0;
  let message: string | null = null;
  let stopped = false;

  const release = (): void => {
    for (const wake of idle) wake();
    idle = [];
  };
  const acknowledged = ({ firstSeq, count }: StoredBlock): void => {
    waiting.shift();
    committed = firstSeq + count;
    failures = 0;
    message = null;
    const due = afterwards.filter(({ seq }) => seq <= committed);
    for (const item of due) {
      afterwards.splice(afterwards.indexOf(item), 1);
      item.then();
    }
  };
  const send = async (): Promise<void> => {
    sending = true;
    while (waiting.length > 0 && !stopped) {
      const { block } = waiting[0] as { readonly block: StoredBlock };
      const result = await store.append(runId, block);
      if (result.ok) {
        acknowledged(block);
        changed();
        continue;
      }
      message = result.error.message;
      const pause = PAUSES_MS[Math.min(failures++, PAUSES_MS.length - 1)] as number;
      changed();
      release();
      await new Promise<void>((resume) => after(pause, resume));
    }
    sending = false;
    release();
  };
  return {
    get committed() {
      return committed;
    },
    waiting: () => waiting.map(({ block }) => block),
    push(block) {
      waiting.push({ block, since: clocks.mono() });
      if (!sending && !stopped) void send();
    },
    status: () => {
      const slow = waiting.length > 0 && clocks.mono() - (waiting[0] as { readonly since: number }).since > SLOW_MS;
      return { state: message !== null ? 'failing' : slow ? 'writing' : 'saved', pending: waiting.length, message };
    },
    afterCommit(seq, then) {
      if (seq <= committed) then();
      else afterwards.push({ seq, then });
    },
    drained: () => (waiting.length === 0 || message !== null ? Promise.resolve() : new Promise((wake) => idle.push(wake))),
    stop: () => {
      stopped = true;
      release();
    },
  };
}
