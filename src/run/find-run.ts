import type { RunHeader } from '#shared/journal/run-header.ts';
import { begin } from '#shared/pace/run.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import { type KnownRun, newKnownRun, restoreRun } from './known-run.ts';
import type { OpenRunFailure, OpenRunOptions } from './open-run.ts';
import type { RunEnvironment } from './run-environment.ts';
import { lockName } from './run-messages.ts';

export interface FoundRun {
  readonly run: KnownRun;
  /** Lets go of the run's lock; null where another window holds it. */
  readonly release: (() => void) | null;
  readonly isNew: boolean;
}

/** The run that was asked for, made where it is new, and its lock where it is free. */
export async function findRun(options: OpenRunOptions, environment: RunEnvironment): Promise<Result<FoundRun, OpenRunFailure>> {
  const { which } = options;
  if (which === 'new') return createRun(options, environment);
  if (typeof which === 'object') return restored(options, which.runId, environment);
  // Two windows that open the attempt at once must end up in one run.
  const attempt = await environment.locks.wait(`evenline-attempt:${options.pack.attempt.id}`, new AbortController().signal);
  try {
    const runId = await openRunOf(options);
    if (!runId.ok) return runId;
    return await (runId.value === null ? createRun(options, environment) : restored(options, runId.value, environment));
  } finally {
    attempt?.();
  }
}

async function openRunOf({ store, pack, deviceId }: OpenRunOptions): Promise<Result<string | null, OpenRunFailure>> {
  try {
    const runs = await store.listRuns();
    const open = runs.filter((run) => !run.ended && run.header.attemptId === pack.attempt.id && run.header.deviceId === deviceId);
    const latest = open.sort((a, b) => b.header.createdMs - a.header.createdMs)[0];
    return ok(latest?.runId ?? null);
  } catch (error) {
    return fail({ code: 'storage', message: error instanceof Error ? error.message : String(error) });
  }
}

async function restored(options: OpenRunOptions, runId: string, { locks }: RunEnvironment): Promise<Result<FoundRun, OpenRunFailure>> {
  const release = await locks.take(lockName(runId));
  const run = await restoreRun(options.store, runId);
  if (run.ok) return ok({ run: run.value, release, isNew: false });
  release?.();
  return run;
}

async function createRun(options: OpenRunOptions, environment: RunEnvironment): Promise<Result<FoundRun, OpenRunFailure>> {
  const { clockRate = 1, practice = false, pack } = options;
  if (!(clockRate > 0) || (clockRate !== 1 && !practice)) {
    return fail({ code: 'rate', message: 'The clock of a real run runs at rate 1. Only practice may run faster.' });
  }
  try {
    begin(pack);
  } catch (error) {
    return fail({
      code: 'pack',
      message: `This pack cannot be driven (${String(error)}). Mend the course book or class and load the pack again.`,
    });
  }
  const header: RunHeader = {
    format: 'evenline-journal',
    version: 1,
    runId: environment.newId(),
    deviceId: options.deviceId,
    entryId: pack.entry.id,
    attemptId: pack.attempt.id,
    packDigest: options.packDigest,
    pack,
    clockRate,
    practice,
    createdMs: environment.clocks.wall(),
    appVersion: options.appVersion,
  };
  const release = await environment.locks.take(lockName(header.runId));
  // A run starts though there may be no room for it: it is written as soon as there is, and says so until then.
  await options.store.createRun(header);
  return ok({ run: newKnownRun(header), release, isNew: true });
}
