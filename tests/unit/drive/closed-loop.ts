import type { Pack } from '#shared/course/pack.ts';
import { createDrive } from '#shared/drive/drive-model.ts';
import type { DriveOptions } from '#shared/drive/drive-options.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { begin, type RunState, readout, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';

/** Driver and engine in a loop: the simulated driver follows the engine's display, the engine sees only what is sensed. */

const RELEASE_US = 60e6;
const RELEASE_MS = 1_800_000_000_000;
const SLICE_US = 250_000;

export interface LoopResult {
  readonly state: RunState;
  /** Displayed time error at the finish line less the true one, seconds; NaN if the finish was not reached. */
  readonly displayError: number;
  /** True time error at the finish, seconds, positive = late. */
  readonly finishError: number;
  readonly elapsedS: number;
  readonly observations: number;
}

export function driveWithEngine(pack: Pack, seed: number, options: Partial<DriveOptions> = {}, limitS = 4000): LoopResult {
  const state = begin({ ...pack, attempt: { ...pack.attempt, releaseMs: RELEASE_MS } });
  const drive = createDrive({ ...options, pack, seed });
  let seq = 0;
  const take = (o: NewObservation): void => step(state, { ...o, seq: seq++ } as Observation);
  take({ type: 'clock.v1', at: micros(1), source: 'exchange', officialMs: RELEASE_MS - RELEASE_US / 1000, uncertaintyMs: 5 });
  let finishAt: number | undefined;
  let t = 0;
  for (; t < limitS * 1e6 && (finishAt === undefined || t < finishAt + 12e6); t += SLICE_US) {
    const shown = readout(state, micros(t));
    const holdSpeed = shown.hold.kind === 'none' ? null : shown.hold.speed;
    for (const o of drive.advance(t + SLICE_US, { at: t, holdSpeed, toRelease: shown.toRelease })) take(o);
    finishAt ??= drive.passings().find((p) => p.checkpoint === 'finish')?.at;
  }
  const finish = readout(state, micros(t)).finish;
  const trueElapsed = ((finishAt ?? Number.NaN) - RELEASE_US) / 1e6;
  return {
    state,
    elapsedS: finish?.elapsed ?? Number.NaN,
    displayError: (finish?.elapsed ?? Number.NaN) - trueElapsed,
    finishError: trueElapsed - pack.raceClass.targetTimeMs / 1000,
    observations: seq,
  };
}
