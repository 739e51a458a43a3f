import type { Pack } from '#shared/course/pack.ts';
import { createDrive, type Drive } from '#shared/drive/drive-model.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { begin, readout, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import { createJournalWriter } from './journal-writer.ts';

/** A whole run at a desk: the simulated car follows what the engine shows, and everything it says is journalled. */
export interface DriveScript {
  readonly pack: Pack;
  readonly seed: number;
  /** Typed in on the grid where the pack has another or none. */
  readonly releaseMs: number;
  /** A checkpoint whose touch the navigator forgets. */
  readonly forgets: string | null;
  /** Red flag this many seconds after the release; the run is then given up for a rerun. */
  readonly redFlagAfterS: number | null;
}

/** The tablet is taken up this long before the release. */
export const GRID_MS = 180_000;
/** A block's time. */
const STEP_US = 250_000;
const CLOCK_PAIR_US = 10_000_000;
/** The crew closes the run this long after the car stands. */
const CLOSE_AFTER_US = 20_000_000;
const STANDS_BELOW = 0.01;
/** Nobody is out for longer: a drive that has not ended by then is a fault of the model. */
const LONGEST_US = 2 * 3600 * 1_000_000;

export function driveRun(script: DriveScript): readonly Buffer[] {
  const state = begin(script.pack);
  const writer = createJournalWriter();
  const wallAtZero = script.releaseMs - GRID_MS;
  const drive = createDrive({ pack: script.pack, seed: script.seed, utcMsAtZero: wallAtZero, navigator: { missed: 0 } });
  const journal = (observations: readonly NewObservation[]): void => {
    for (const observation of writer.add(observations)) step(state, observation);
  };

  journal(openingActs(wallAtZero));
  if (script.pack.attempt.releaseMs !== script.releaseMs) journal([{ type: 'release-set.v1', at: 0, releaseMs: script.releaseMs }]);
  let flagged = false;
  let shown: Readout | null = null;
  let stoodSince: number | null = null;
  for (let now = STEP_US; now < LONGEST_US; now += STEP_US) {
    const display = shown === null ? null : { at: now - STEP_US, holdSpeed: holdOf(shown), toRelease: shown.toRelease, stopped: flagged };
    journal(drive.advance(now, display).filter((observation) => !isForgotten(observation, script.forgets)));
    if (now % CLOCK_PAIR_US === 0) journal([{ type: 'clock-pair.v1', at: now, mono: now / 1000, wall: wallAtZero + now / 1000 }]);
    shown = readout(state, micros(now));
    if (!flagged && script.redFlagAfterS !== null && (shown.elapsed ?? 0) >= script.redFlagAfterS) {
      flagged = true;
      journal([{ type: 'run-stopped.v1', at: now }]);
    }
    stoodSince = stands(drive, now) && (flagged || shown.finish !== null) ? (stoodSince ?? now) : null;
    if (stoodSince !== null && now - stoodSince >= CLOSE_AFTER_US) {
      journal(closingActs(now, shown, state.engine, flagged));
      return writer.chunks();
    }
  }
  throw new Error('the simulated drive never came to its end');
}

function openingActs(wallAtZero: number): NewObservation[] {
  return [
    { type: 'epoch.v1', at: 0, n: 0, mono: 0, wall: wallAtZero, bridgedBy: 'first', uncertaintyMs: 0 },
    { type: 'sensor-gained.v1', at: 0, sensor: 'simulator', detail: 'Simulated drive' },
    { type: 'clock.v1', at: 0, source: 'exchange', officialMs: wallAtZero, uncertaintyMs: 4 },
  ];
}

function closingActs(at: number, { finish }: Readout, engine: string, flagged: boolean): NewObservation[] {
  const ended: NewObservation = { type: 'run-ended.v1', at, outcome: flagged ? 'rerun' : 'finished' };
  if (finish === null) return [ended];
  const { elapsed, timeError, sigma } = finish;
  return [{ type: 'finish-shown.v1', at, engine, elapsedMs: elapsed * 1000, timeErrorMs: timeError * 1000, sigmaMs: sigma * 1000 }, ended];
}

const holdOf = ({ hold }: Readout): number | null => (hold.kind === 'none' ? null : hold.speed);
const isForgotten = (observation: NewObservation, forgets: string | null): boolean =>
  observation.type === 'tap.v1' && forgets !== null && observation.checkpoint === forgets;
const stands = (drive: Drive, now: number): boolean => drive.movedAt !== null && drive.truth(now).speed < STANDS_BELOW;
