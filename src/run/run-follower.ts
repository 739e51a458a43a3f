import { decodeBlock, type Journalled } from '#shared/journal/block.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { measureClockOffset, type SessionClock } from './clock.ts';
import { type KnownRun, takeObservation } from './known-run.ts';
import type { RunChannel, RunEnvironment } from './run-environment.ts';
import type { PublishedStatus, RunMessage } from './run-messages.ts';

/** A window that shows what another one records: it folds the same observations, at the same clock. */
export interface RunFollower {
  status(): PublishedStatus | null;
  /** How well this window knows the writer's clock; null where it never answered. */
  readonly clockUncertaintyMs: number | null;
  /** After the writer's death: takes what storage holds, and says what only this window saw. Follows no longer. */
  takeOver(): Promise<readonly Journalled[]>;
  close(): void;
}

interface FollowOptions {
  readonly run: KnownRun;
  readonly clock: SessionClock;
  readonly store: JournalStore;
  readonly channel: RunChannel;
  readonly environment: Pick<RunEnvironment, 'after' | 'newId'>;
  readonly changed: () => void;
}

/** A writer whose page is frozen answers nothing. */
const ANSWER_MS = 500;

export function followRun({ run, clock, store, channel, environment, changed }: FollowOptions): RunFollower {
  const { runId } = run.header;
  let committed = run.nextSeq;
  let seen: Journalled[] = [];
  let status: PublishedStatus | null = null;
  let uncertaintyMs: number | null = null;
  const ask = createAsker(channel, environment);

  const take = (observation: Journalled): void => {
    takeObservation(run, observation);
    seen.push(observation);
  };
  const catchUp = async (): Promise<void> => {
    const blocks = await store.blocks(runId, committed);
    if (!blocks.ok) return;
    for (const { bytes } of blocks.value) {
      const read = decodeBlock(bytes);
      if (read.ok) for (const o of read.value.observations) if (o.seq === run.nextSeq) take(o);
    }
  };
  const observe = async (message: Extract<RunMessage, { type: 'observed' }>): Promise<void> => {
    const first = message.observations[0];
    const end = first?.seq ?? message.committed;
    if (end > run.nextSeq) await catchUp();
    for (const observation of message.observations) if (observation.seq === run.nextSeq) take(observation);
    if (message.committed <= run.nextSeq) committed = Math.max(committed, message.committed);
    seen = seen.filter(({ seq }) => seq >= committed);
    if (message.observations.some(({ type }) => type === 'epoch.v1')) void meetClock();
    changed();
  };
  const meetClock = async (): Promise<void> => {
    const { offset, uncertainty } = await measureClockOffset(ask.reading, clock.now).catch(() => NO_ANSWER);
    if (!Number.isFinite(uncertainty)) return;
    clock.shift(-offset);
    uncertaintyMs = uncertainty / 1000;
    changed();
  };

  let last: Promise<void> = Promise.resolve();
  channel.onmessage = ({ data }: MessageEvent<RunMessage>) => {
    if (data.type === 'reading') ask.answer(data);
    else if (data.type === 'status') {
      status = data.status;
      changed();
    } else if (data.type === 'observed') {
      // One behind the other, although a gap may have to be read from storage first.
      last = last.then(() => observe(data));
    }
  };
  channel.postMessage({ type: 'hello' } satisfies RunMessage);
  void meetClock();
  return {
    status: () => status,
    get clockUncertaintyMs() {
      return uncertaintyMs;
    },
    async takeOver() {
      channel.close();
      await last;
      const stored = await store.readRun(runId);
      const end = stored.ok ? endOf(stored.value.blocks) : committed;
      if (end > run.nextSeq) await catchUp();
      return seen.filter(({ seq }) => seq >= end);
    },
    close: () => channel.close(),
  };
}

const NO_ANSWER = { offset: 0, uncertainty: Number.POSITIVE_INFINITY };

const endOf = (blocks: readonly { readonly firstSeq: number; readonly count: number }[]): number => {
  const last = blocks.at(-1);
  return last === undefined ? 0 : last.firstSeq + last.count;
};

/** Questions for the writer's clock, each with its answer or none. */
function createAsker(channel: RunChannel, { after, newId }: Pick<RunEnvironment, 'after' | 'newId'>) {
  const waiting = new Map<string, (at: number) => void>();
  const mine = newId();
  let asked = 0;
  return {
    reading: (): Promise<number> =>
      new Promise((resolve, reject) => {
        const id = `${mine} ${asked++}`;
        waiting.set(id, resolve);
        after(ANSWER_MS, () => waiting.delete(id) && reject(new Error('the recording window does not answer')));
        channel.postMessage({ type: 'ask', id } satisfies RunMessage);
      }),
    answer: ({ id, at }: { readonly id: string; readonly at: number }): void => {
      waiting.get(id)?.(at);
      waiting.delete(id);
    },
  };
}
