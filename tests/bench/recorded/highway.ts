import { highwayCourse, highwayRun } from '#tests/e2e/support/highway-course.ts';
import { playedDrives } from '#tests/e2e/support/highway-drive.ts';
import { HIGHWAY_DRIVES, type HighwayRecording, readHighway } from '#tests/e2e/support/highway-recording.ts';
import { gateAt, type HighwayTrack, highwayTrack, passingTime } from '#tests/e2e/support/highway-track.ts';
import { readStream } from '#tests/unit/drive/highway-replay.ts';
import { between, makePath, type Path } from './path.ts';
import { geometryOf, type RecordedDrive } from './recorded-drive.ts';

/**
 * Both passes of one stretch of highway, through the real sentence reader. The first pass is the survey of the course; the second is
 * measured against it, gate by gate. Each is driven with the wheel scales that the other one would have taught.
 */
const LENGTH = 11_500;
const GATES_EVERY = 250;
const REST_UTC_S = 15;
const CALIBRATED = [1500, 10_500] as const;
const SCALE_SIGMA = 0.003;

export function highwayDrives(): RecordedDrive[] {
  const [first, second] = playedDrives();
  const recordings = HIGHWAY_DRIVES.map(readHighway) as [HighwayRecording, HighwayRecording];
  const tracks = recordings.map(highwayTrack) as [HighwayTrack, HighwayTrack];
  const course = highwayCourse(tracks[0], REST_UTC_S);
  const line = course.gates.get('start')?.surveyed ?? Number.NaN;
  const run = (i: 0 | 1, restUtcS: number) => highwayRun(recordings[i], tracks[i], course, restUtcS);
  const runs = [run(0, REST_UTC_S), run(1, 11.5)] as const;
  // session zero on the recording computer's clock
  const zero = [first, second].map((p, i) => (runs[i as 0 | 1].releaseHostS ?? 0) - p.releaseAfterMs / 1000) as [number, number];
  const truths = [surveyPath(tracks[0], zero[0], line), gatedPath(tracks[1], zero[1], tracks[0], line)] as const;
  const scales = [0, 1].map((i) => scalesOf(recordings[i as 0 | 1], truths[i as 0 | 1], zero[i as 0 | 1]));
  return [first, second].map((played, i): RecordedDrive => {
    const known = scales[1 - i] as { right: number; left: number };
    return {
      name: `highway ${i + 1}`,
      truthBy: i === 0 ? 'RTK path' : 'RTK path, on the line of the first pass',
      truth: truths[i as 0 | 1],
      releaseT: played.releaseAfterMs / 1000,
      stagedBehindM: runs[i as 0 | 1].stagedBehindM,
      lengthM: LENGTH,
      arrived: readStream(played.sentences(0)).arrived.map(({ arrivalUs, observation }) => ({ t: arrivalUs / 1e6, observation })),
      wheels: [
        { name: 'right', channel: 0, mmPerPulse: known.right, scaleSigma: SCALE_SIGMA },
        { name: 'left', channel: 1, mmPerPulse: known.left, scaleSigma: SCALE_SIGMA },
      ],
      gnss: { speed: true, position: true },
      geometry: i === 0 ? null : geometryOf(truths[0]),
    };
  });
}

function surveyPath(track: HighwayTrack, zero: number, line: number): Path {
  return makePath(
    track.points.map(({ utcS, lat, lon, distance }) => ({ t: track.hostAt(utcS) - zero, metres: distance - line, lat, lon })),
  );
}

/** Between two gates of the survey the second pass's own metres are stretched onto the official ones. */
function gatedPath(track: HighwayTrack, zero: number, survey: HighwayTrack, line: number): Path {
  const gates: { own: number; official: number }[] = [];
  for (let official = 0; official <= LENGTH + GATES_EVERY; official += GATES_EVERY) {
    const utcS = passingTime(track, gateAt(survey, line + official));
    if (utcS !== null) gates.push({ own: track.distanceAt(utcS), official });
  }
  const [first, last] = [gates[0], gates.at(-1)];
  if (first === undefined || last === undefined) throw new Error('the second pass never meets the first');
  const official = (own: number): number => {
    if (own <= first.own) return first.official + own - first.own;
    if (own >= last.own) return last.official + own - last.own;
    return between(
      gates,
      own,
      (g) => g.own,
      (g) => g.official,
    );
  };
  return makePath(
    track.points.map(({ utcS, lat, lon, distance }) => ({ t: track.hostAt(utcS) - zero, metres: official(distance), lat, lon })),
  );
}

/** Wheel scales over the middle of a pass, mm per count. */
function scalesOf({ encoder }: HighwayRecording, truth: Path, zero: number): { right: number; left: number } {
  const [from, to] = CALIBRATED.map((metres) => truth.timeAt(metres) + zero) as [number, number];
  const counts = (value: (row: HighwayRecording['encoder'][number]) => number): number => {
    const at = (hostS: number): number => between(encoder, hostS, (row) => row.hostS, value);
    return at(to) - at(from);
  };
  const mm = (CALIBRATED[1] - CALIBRATED[0]) * 1000;
  return { right: mm / counts((row) => row.c2), left: mm / counts((row) => -row.c1) };
}
