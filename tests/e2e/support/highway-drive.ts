import type { Pack } from '#shared/course/pack.ts';
import {
  type HighwayCourse,
  type HighwayRun,
  highwayCourse,
  highwayPack,
  highwayRun,
  highwayTaps,
} from '#tests/e2e/support/highway-course.ts';
import { HIGHWAY_DRIVES, type HighwayRecording, readHighway } from '#tests/e2e/support/highway-recording.ts';
import { highwayTrack } from '#tests/e2e/support/highway-track.ts';
import { recordingToSentences } from '#tests/e2e/support/recording-to-sentences.ts';
import type { TimedText } from '#tests/e2e/support/timed-text.ts';

/**
 * A recorded drive ready to be driven again. All instants are ms after the stream's beginning, in the stream's own time; played
 * at rate r against a session clock of rate r they are session time. The car stands for some seconds before the release.
 */
export interface PlayedDrive {
  readonly course: HighwayCourse;
  readonly releaseAfterMs: number;
  /** UTC of the recording at the stream's beginning, unix ms. */
  readonly utcAtStartMs: number;
  /** True passings, start line and finish included. */
  readonly passings: readonly PlayedInstant[];
  /** The navigator's touches, ms late by a lead and scattered. */
  taps(habits: { seed: number; leadMs: number; scatterMs: number }): readonly PlayedInstant[];
  /** The pack of the drive with its release at that official instant; wheel only. */
  pack(options: { releaseMs: number; leadMs: number; scatterMs: number; scaleRule: Pack['settings']['scaleRule'] }): Pack;
  /** @param utcShiftMs moves the receiver's time, for example to the present */
  sentences(utcShiftMs: number): readonly TimedText[];
}

export interface PlayedInstant {
  readonly checkpoint: string;
  readonly afterMs: number;
}

/** Receiver's times at which the cars stood before their starts, and the part of each recording that is played. */
const PARTS = [
  { restUtcS: 15, fromS: 11.5, toS: 520 },
  { restUtcS: 11.5, fromS: 10, toS: 500 },
] as const;
/** The counters and the box's clock wrap half-way. */
const WRAP_AT_S = 250;
/** Legs that the first drive's wheel scale is taken from. */
const CALIBRATED = { from: 'alder', to: 'gorse', metres: 9000 };
const SCALE_SIGMA = 0.003;

function countAt({ encoder }: HighwayRecording, hostS: number): number {
  const after = encoder.findIndex((row) => row.hostS >= hostS);
  const [a, b] = [encoder[after - 1], encoder[after]];
  if (a === undefined || b === undefined) throw new Error('outside the recording');
  return a.c2 + ((b.c2 - a.c2) * (hostS - a.hostS)) / (b.hostS - a.hostS);
}

/** Both drives over the course that the first one surveys; the wheel scale of both is the first one's. */
export function playedDrives(): readonly [PlayedDrive, PlayedDrive] {
  const [first, second] = HIGHWAY_DRIVES.map(readHighway) as [HighwayRecording, HighwayRecording];
  const survey = highwayTrack(first);
  const course = highwayCourse(survey, PARTS[0].restUtcS);
  const run = highwayRun(first, survey, course, PARTS[0].restUtcS);
  const count = (id: string): number => countAt(first, run.passings.find((p) => p.checkpoint === id)?.hostS ?? Number.NaN);
  const mmPerPulse = (CALIBRATED.metres * 1000) / (count(CALIBRATED.to) - count(CALIBRATED.from));
  const secondRun = highwayRun(second, highwayTrack(second), course, PARTS[1].restUtcS);
  return [played(first, PARTS[0], course, run, mmPerPulse), played(second, PARTS[1], course, secondRun, mmPerPulse)];
}

function played(
  recording: HighwayRecording,
  part: (typeof PARTS)[number],
  course: HighwayCourse,
  run: HighwayRun,
  mmPerPulse: number,
): PlayedDrive {
  const afterMs = (hostS: number): number => (hostS - part.fromS) * 1000;
  const instant = (p: { checkpoint: string; hostS: number }): PlayedInstant => ({ checkpoint: p.checkpoint, afterMs: afterMs(p.hostS) });
  return {
    course,
    releaseAfterMs: afterMs(run.releaseHostS),
    utcAtStartMs: run.releaseUtcMs - afterMs(run.releaseHostS),
    passings: run.passings.map(instant),
    taps: (habits) => highwayTaps(run, course, habits).map(instant),
    pack: (options) => highwayPack(course, { ...options, mmPerPulse, scaleSigma: SCALE_SIGMA, stagedBehindM: run.stagedBehindM }),
    sentences: (utcShiftMs) => recordingToSentences(recording, { fromS: part.fromS, toS: part.toS, wrapAtS: WRAP_AT_S, utcShiftMs }),
  };
}
