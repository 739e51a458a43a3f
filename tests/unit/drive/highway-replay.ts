import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { begin, type RunState, readout, step } from '#shared/pace/run.ts';
import { createSentenceReader, type SentenceReader } from '#shared/sensor/sentence-reader.ts';
import { micros } from '#shared/units.ts';
import type { PlayedDrive, PlayedInstant } from '#tests/e2e/support/highway-drive.ts';
import type { TimedText } from '#tests/e2e/support/timed-text.ts';
import { bytesOf } from '#tests/unit/sensor/reading.ts';

export interface Arrived {
  readonly arrivalUs: number;
  readonly observation: NewObservation;
}

/** Bytes of a paced stream to observations, with the session instant at which each came. */
export function readStream(stream: readonly TimedText[]): { arrived: readonly Arrived[]; reader: SentenceReader } {
  const reader = createSentenceReader();
  const arrived = stream.flatMap(({ atMs, text }) =>
    reader.push(bytesOf(text), atMs * 1000).map((observation): Arrived => ({ arrivalUs: atMs * 1000, observation })),
  );
  return { arrived, reader };
}

/** A recorded drive in the engine, looked at whenever the car truly passes a place. */
export interface HighwayReplay {
  readonly state: RunState;
  /** What the engine showed at each true passing, before any touch there: official distance less the true one, m. */
  readonly errors: readonly { readonly checkpoint: string; readonly printed: number; readonly error: number }[];
  /** Finish by the engine and in truth, seconds since the release. */
  readonly finish: { readonly shown: number; readonly timeError: number; readonly sigma: number; readonly truth: number };
}

export interface HighwayInput {
  readonly pack: Pack;
  readonly arrived: readonly Arrived[];
  readonly drive: PlayedDrive;
  readonly taps: readonly PlayedInstant[];
}

export function replayHighway({ pack, arrived, drive, taps }: HighwayInput): HighwayReplay {
  const state = begin(pack);
  const micro = (ms: number): number => Math.round(ms * 1000);
  let seq = 0;
  const take = (o: NewObservation): void => step(state, { ...o, seq: seq++ } as Observation);
  // A clock check on the grid, as every start has.
  take({
    type: 'clock.v1',
    at: 0,
    source: 'exchange',
    officialMs: (pack.attempt.releaseMs ?? Number.NaN) - drive.releaseAfterMs,
    uncertaintyMs: 5,
  });

  const errors: { checkpoint: string; printed: number; error: number }[] = [];
  const look = ({ checkpoint, afterMs }: PlayedInstant): void => {
    const row = pack.courseBook.checkpoints.find((c) => c.id === checkpoint);
    const printed = Number(row?.at.text) * 1000;
    errors.push({ checkpoint, printed, error: readout(state, micros(micro(afterMs))).distance - printed });
  };
  const touch = ({ checkpoint, afterMs }: PlayedInstant): void => take({ type: 'tap.v1', at: micro(afterMs), input: 'glass', checkpoint });
  const due = [...drive.passings.map((p) => ({ ...p, act: look })), ...taps.map((t) => ({ ...t, act: touch }))].sort(
    (a, b) => a.afterMs - b.afterMs,
  );

  for (const { arrivalUs, observation } of arrived) {
    for (let next = due[0]; next !== undefined && micro(next.afterMs) <= arrivalUs; next = due[0]) {
      due.shift();
      next.act(next);
    }
    take(observation);
  }
  const { finish } = readout(state, micros(arrived.at(-1)?.arrivalUs ?? 0));
  const line = drive.passings.find((p) => p.checkpoint === 'finish');
  return {
    state,
    errors,
    finish: {
      shown: finish?.elapsed ?? Number.NaN,
      timeError: finish?.timeError ?? Number.NaN,
      sigma: finish?.sigma ?? Number.NaN,
      truth: ((line?.afterMs ?? Number.NaN) - drive.releaseAfterMs) / 1000,
    },
  };
}
