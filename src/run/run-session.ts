import { v7 as uuidv7 } from 'uuid';
import { readout } from '#shared/pace/run.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import type { SensorSource } from '#src/sensors/sensor-source.ts';
import { type ChangeNotice, changeKey, createChangeNotice } from './change-notice.ts';
import { createSessionClock, type SessionClock } from './clock.ts';
import { createCourseNow } from './course-now.ts';
import { bridgedByWall } from './epoch.ts';
import { type FoundRun, findRun } from './find-run.ts';
import type { OpenRunFailure, OpenRunOptions } from './open-run.ts';
import { browserEnvironment, type RunEnvironment } from './run-environment.ts';
import { createRunRoles } from './run-roles.ts';
import type { RunFailure, RunSession, RunStatus } from './run-session-contract.ts';

/**
 * Opens a run on this device, new or to go on with. Whoever gets its Web Lock records; every other window follows, shows the
 * same figures, and takes over when the recording one dies. The cockpit is a client of what this resolves with.
 */
export async function openRunSession(options: OpenRunOptions): Promise<Result<RunSession, OpenRunFailure>> {
  const environment = options.environment ?? browserEnvironment(uuidv7);
  const found = await findRun(options, environment);
  if (!found.ok) return found;
  const { run } = found.value;
  const rate = run.header.clockRate;
  const { clocks } = environment;
  const clock = createSessionClock({ rate, from: bridgedByWall(run.life, clocks, rate), clocks });
  return ok(createSession(options, environment, found.value, clock));
}

function createSession(options: OpenRunOptions, environment: RunEnvironment, found: FoundRun, clock: SessionClock): RunSession {
  const { run, isNew } = found;
  const { store } = options;
  const now = () => readout(run.state, clock.now());
  // The writer already has something to tell while it is being made.
  let notice: ChangeNotice | null = null;
  const roles = createRunRoles({ found, clock, store, environment, exchangeTime: options.exchangeTime, changed: () => notice?.look() });
  const status = createStatus(() => ({ ...roles.status(), clockRate: run.header.clockRate, restored: !isNew }));
  const changes = createChangeNotice(() => changeKey(now(), status(), roles.role(), run.state.changes.version), environment.nextFrame);
  notice = changes;
  let closing: Promise<void> | null = null;

  return {
    header: run.header,
    clock,
    get role() {
      return roles.role();
    },
    readout: now,
    course: createCourseNow(() => run.state),
    derive: (of) => of(run.state, run.header),
    status,
    subscribe: changes.subscribe,
    exportJournal: async () => {
      const { exportJournal } = await import('./export-journal.ts');
      return exportJournal(store, run.header, roles.writer()?.uncommitted() ?? []);
    },
    act(act, eventTimeStamp) {
      const writer = roles.writer();
      if (closing !== null) return fail(CLOSED);
      if (writer === null) return fail(READ_ONLY);
      const seq = writer.act(() => ({ ...act, at: clock.at(stampOf(eventTimeStamp, environment)) }));
      return seq === null ? fail(ENDED) : ok({ seq });
    },
    attach: (source: SensorSource, how) => roles.attach(source, how),
    detach: () => roles.detach(),
    checkClock: async () => (closing !== null ? fail(CLOSED) : roles.checkClock()),
    close: () => (closing ??= roles.close()),
  };
}

/** An event waits in line behind a busy page; its own stamp is the instant of the touch. One that cannot be is now. */
function stampOf(eventTimeStamp: number | undefined, { clocks }: RunEnvironment): number {
  const mono = clocks.mono();
  const believable = eventTimeStamp !== undefined && eventTimeStamp <= mono && eventTimeStamp > mono - OLDEST_EVENT_MS;
  return believable ? eventTimeStamp : mono;
}
const OLDEST_EVENT_MS = 10_000;

/** The same object for as long as nothing in it changes, so that React may compare it. */
function createStatus(compute: () => RunStatus): () => RunStatus {
  let key = '';
  let current: RunStatus | null = null;
  return () => {
    const next = compute();
    const nextKey = JSON.stringify(next);
    if (current === null || nextKey !== key) current = next;
    key = nextKey;
    return current;
  };
}

const READ_ONLY: RunFailure = {
  code: 'read-only',
  message: 'Another window of this tablet records this run. Use that one, or close it: this one then goes on.',
};
const ENDED: RunFailure = { code: 'closed', message: 'This run has ended, and its journal with it. Begin another run of the attempt.' };
const CLOSED: RunFailure = { code: 'closed', message: 'This run was closed here. Open it again.' };
