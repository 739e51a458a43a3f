import type { Journalled } from '#shared/journal/block.ts';
import { fail, type Result } from '#shared/result.ts';
import type { SensorFailure, SensorSource } from '#src/sensors/sensor-source.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { SessionClock } from './clock.ts';
import { type ClockKeeper, createClockKeeper } from './clock-keeper.ts';
import { WALL_BRIDGE_MS } from './epoch.ts';
import type { FoundRun } from './find-run.ts';
import type { OpenRunOptions } from './open-run.ts';
import type { RunEnvironment } from './run-environment.ts';
import { followRun, type RunFollower } from './run-follower.ts';
import { channelName, lockName, type PublishedStatus } from './run-messages.ts';
import { createRunPublisher, type RunPublisher } from './run-publisher.ts';
import type { RunFailure, RunSession } from './run-session-contract.ts';
import { createRunWriter, type RunWriter, type WriterOptions } from './run-writer.ts';
import { createSensorPort } from './sensor-port.ts';

/** Writer or reader of one run, and the way from the one to the other. */
export interface RunRoles extends Pick<RunSession, 'attach' | 'detach' | 'checkClock' | 'close'> {
  role(): RunSession['role'];
  /** Null in a window that only reads. */
  writer(): RunWriter | null;
  status(): PublishedStatus;
}

interface RolesOptions {
  readonly found: FoundRun;
  readonly clock: SessionClock;
  readonly store: JournalStore;
  readonly environment: RunEnvironment;
  readonly exchangeTime: OpenRunOptions['exchangeTime'];
  readonly changed: () => void;
}

/** What only a writer has. */
interface Writing {
  readonly writer: RunWriter;
  readonly publisher: RunPublisher;
  readonly keeper: ClockKeeper;
}

export function createRunRoles({ found, clock, store, environment, exchangeTime, changed }: RolesOptions): RunRoles {
  const { run } = found;
  const { runId } = run.header;
  const ended = new AbortController();
  let release = found.release;
  let writing: Writing | null = null;
  let follower: RunFollower | null = null;
  let wanted: SensorSource | null = null;

  const status = (): PublishedStatus => {
    if (writing !== null) return { sensor: port.status(), storage: { ...writing.writer.queue.status(), recovered: run.recovered } };
    return follower?.status() ?? { sensor: null, storage: { state: 'saved', pending: 0, message: null, recovered: run.recovered } };
  };
  const tell = (): void => {
    writing?.publisher.status(status());
    changed();
  };
  const port = createSensorPort({ observed: (all) => writing?.writer.observe(all), now: clock.now, changed: () => tell() });

  const startWriting = (bridge: WriterOptions['bridge'], leftOver: readonly Journalled[]): void => {
    const numbered = (all: readonly Journalled[]): void => writing?.publisher.observed(all);
    const writer = createRunWriter({ run, clock, store, environment, bridge, leftOver, numbered, changed: () => tell() });
    const publisher = createRunPublisher(environment.channel(channelName(runId)), {
      clock,
      status,
      uncommitted: writer.uncommitted,
      committed: () => writer.queue.committed,
    });
    const keeper = createClockKeeper({ state: run.state, clock, exchangeTime, environment, act: writer.act });
    writing = { writer, publisher, keeper };
  };
  const takeOver = async (following: RunFollower): Promise<void> => {
    const granted = await environment.locks.wait(lockName(runId), ended.signal);
    if (granted === null) return;
    const leftOver = await following.takeOver();
    if (ended.signal.aborted) return granted();
    release = granted;
    const uncertaintyMs = following.clockUncertaintyMs;
    const bridge =
      uncertaintyMs === null ? ({ by: 'wall', uncertaintyMs: WALL_BRIDGE_MS } as const) : ({ by: 'page', uncertaintyMs } as const);
    startWriting(bridge, leftOver);
    if (wanted !== null) void port.attach(wanted, { ask: false });
    tell();
  };

  if (release === null) {
    follower = followRun({ run, clock, store, channel: environment.channel(channelName(runId)), environment, changed });
    void takeOver(follower);
  } else {
    startWriting(found.isNew ? { by: 'first', uncertaintyMs: 0 } : { by: 'wall', uncertaintyMs: WALL_BRIDGE_MS }, []);
  }
  return {
    role: () => (writing === null ? 'reader' : 'writer'),
    writer: () => writing?.writer ?? null,
    status,
    async attach(source, options): Promise<Result<void, SensorFailure>> {
      wanted = source;
      return writing === null ? fail(NOT_HERE) : port.attach(source, options);
    },
    async detach() {
      wanted = null;
      await port.detach();
    },
    checkClock: async () => writing?.keeper.check() ?? fail(READ_ONLY_CLOCK),
    async close() {
      ended.abort();
      writing?.keeper.stop();
      await port.detach();
      follower?.close();
      await writing?.writer.close();
      writing?.publisher.close();
      release?.();
    },
  };
}

const NOT_HERE: SensorFailure = {
  code: 'in-use',
  message: 'Another window of this tablet records this run and has the sensor. This one takes it when that one closes.',
};
const READ_ONLY_CLOCK: RunFailure = { code: 'read-only', message: 'The window that records this run compares its clock.' };
