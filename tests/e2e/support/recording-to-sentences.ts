import { writeGga, writeVtg, writeWheel, writeZda } from '#shared/sensor/sentence-writer.ts';
import type { HighwayRecording } from '#tests/e2e/support/highway-recording.ts';
import type { TimedText } from '#tests/e2e/support/timed-text.ts';

/**
 * A recorded drive as a pulse box and a receiver would have sent it. The box's clock is the recording computer's, counts and
 * faults are the recording's own (stalls, dither at standstill, late fixes, a clock that drifts and steps); only the signed
 * counters are shifted into 0..2^32-1. Right wheel on channel 0, left wheel (turned to run forwards) on channel 1.
 */
export interface SentenceOptions {
  /** Moves the receiver's time, so that an old recording can be driven today. Whole seconds, ms. */
  readonly utcShiftMs?: number;
  /** Lets both wheel counters and the box's clock pass 2^32 this many seconds into the recording. */
  readonly wrapAtS?: number;
  /** Leaves out what lies before or after, seconds of the recording. */
  readonly fromS?: number;
  readonly toS?: number;
}

const WRAP = 2 ** 32;
const unsigned = (value: number): number => ((Math.round(value) % WRAP) + WRAP) % WRAP;

export function recordingToSentences(recording: HighwayRecording, options: SentenceOptions = {}): TimedText[] {
  const { fromS = 0, toS = Number.POSITIVE_INFINITY } = options;
  const rows = [...wheelLines(recording, options.wrapAtS), ...receiverLines(recording, options.utcShiftMs ?? 0)]
    .filter((row) => row.hostS >= fromS && row.hostS <= toS)
    .sort((a, b) => a.hostS - b.hostS);
  return rows.map(({ hostS, text }) => ({ atMs: (hostS - fromS) * 1000, text }));
}

interface Row {
  readonly hostS: number;
  readonly text: string;
}

function wheelLines({ encoder }: HighwayRecording, wrapAtS: number | undefined): Row[] {
  const at = wrapAtS === undefined ? undefined : encoder.find((row) => row.hostS >= wrapAtS);
  const [shift1, shift2, shiftUs] = at === undefined ? [0, 0, 0] : [at.c1, -at.c2, -at.hostS * 1e6];
  return encoder.map(({ hostS, c1, c2 }) => {
    const boxUs = unsigned(hostS * 1e6 + shiftUs);
    return { hostS, text: writeWheel(0, unsigned(c2 + shift2), boxUs) + writeWheel(1, unsigned(-c1 + shift1), boxUs) };
  });
}

function receiverLines({ fixes, utcZeroMs }: HighwayRecording, shiftMs: number): Row[] {
  return fixes.map(({ hostS, utcS, lat, lon, quality, speed }) => {
    const utcMs = utcZeroMs + Math.round(utcS * 1000) + shiftMs;
    const state = { utcMs, lat, lon, speed, course: null };
    // The recording has no date in its sentences; a receiver would tell it once a second.
    const date = utcMs % 1000 === 0 ? writeZda(utcMs) : '';
    return { hostS, text: writeGga(state, quality) + writeVtg(state) + date };
  });
}
