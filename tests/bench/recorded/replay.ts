import type { Pack } from '#shared/course/pack.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { begin, readout, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import { micro, type RecordedDrive } from './recorded-drive.ts';
import { HABITS, packOf, placesOf, type Scenario } from './scenario.ts';

/** What one drive showed, each second and at the true finish: shown less true. */
export interface Shown {
  readonly metres: readonly number[];
  readonly seconds: readonly number[];
  readonly within2Sigma: number;
  readonly end: { readonly metres: number; readonly seconds: number; readonly sigma: number };
}

interface Due {
  readonly t: number;
  readonly act: () => void;
}

/** The shown distance is judged from here on: before, it is the start's extrapolation. */
const FROM_S = 5;
/** So long after the true finish the engine is still fed, so that one that is behind passes it too. */
const AFTER_S = 15;

/** Drives the recording through the engine with seeded touches, and looks once a second. */
export function replay(drive: RecordedDrive, scenario: Scenario, seed: number): Shown {
  const pack = packOf(drive, scenario);
  const state = begin(pack);
  const { truth, releaseT, lengthM } = drive;
  const finishT = truth.timeAt(lengthM);
  const metresPerSecond = lengthM / (pack.raceClass.targetTimeMs / 1000);
  let seq = 0;
  const take = (o: NewObservation): void => step(state, { ...o, seq: seq++ } as Observation);
  take(clockCheck(pack, releaseT));

  const shown = { metres: [] as number[], seconds: [] as number[], within: 0, end: { metres: NaN, seconds: NaN, sigma: NaN } };
  const errorAt = (t: number) => {
    const { distance, timeError, sigma } = readout(state, micros(micro(t)));
    const metres = distance - truth.metresAt(t);
    return { metres, seconds: (timeError ?? Number.NaN) - (t - releaseT - truth.metresAt(t) / metresPerSecond), sigma };
  };
  const look = (t: number): void => {
    const error = errorAt(t);
    shown.metres.push(error.metres);
    shown.seconds.push(error.seconds);
    if (Math.abs(error.seconds) <= 2 * error.sigma) shown.within++;
  };
  const random = createRandom(seed, 'touches');
  const due: Due[] = [];
  for (let t = releaseT + FROM_S; t < finishT; t++) due.push({ t, act: () => look(t) });
  if (scenario.touches)
    for (const metres of placesOf(drive)) {
      const t = truth.timeAt(metres) + (HABITS.leadMs + random.gauss(HABITS.scatterMs)) / 1000;
      due.push({ t, act: () => take({ type: 'tap.v1', at: micro(t), input: 'glass', checkpoint: `at-${metres}` }) });
    }
  due.push({
    t: finishT,
    act: () => {
      shown.end = errorAt(finishT);
    },
  });
  due.sort((a, b) => a.t - b.t);

  let next = 0;
  for (const { t, observation } of drive.arrived) {
    if (t > finishT + AFTER_S) break;
    for (; (due[next]?.t ?? Number.POSITIVE_INFINITY) <= t; next++) due[next]?.act();
    take(observation);
  }
  for (; next < due.length; next++) due[next]?.act();
  // the time that the crew is told at the end; a drive that was thought shorter never ends, and keeps what it showed at the line
  const { finish } = readout(state, micros(state.now));
  if (finish !== null) shown.end.seconds = finish.timeError;
  return { metres: shown.metres, seconds: shown.seconds, within2Sigma: shown.within / shown.metres.length, end: shown.end };
}

const clockCheck = (pack: Pack, releaseT: number): NewObservation => ({
  type: 'clock.v1',
  at: 0,
  source: 'exchange',
  officialMs: (pack.attempt.releaseMs ?? Number.NaN) - releaseT * 1000,
  uncertaintyMs: 5,
});
