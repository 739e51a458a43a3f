import type { Checkpoint, CourseBook, Duty } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { HighwayRecording } from '#tests/e2e/support/highway-recording.ts';
import { gateAt, type HighwayTrack, passingTime } from '#tests/e2e/support/highway-track.ts';

/**
 * A course on the recorded road: the first drive is its survey, every drive over it can be measured against it. Names are
 * invented and positions are left out: the road is other people's.
 */
export interface HighwayCourse {
  readonly book: CourseBook;
  /** The line of each checkpoint across the road, by id, and its distance on the surveying track, m. */
  readonly gates: ReadonlyMap<string, { readonly lat: number; readonly lon: number; readonly azimuth: number; readonly surveyed: number }>;
}

const KM: readonly (readonly [string, Duty, number])[] = [
  ['start', 'start', 0],
  ['alder', 'settle', 1.5],
  ['birch', 'scale', 3],
  ['cedar', 'scale', 4.5],
  ['damson', 'scale', 6],
  ['elder', 'scale', 7.5],
  ['fir', 'scale', 9],
  ['gorse', 'scale', 10.5],
  ['finish', 'finish', 11.5],
];
/** The surveying car's nose stood this far behind the line, m. */
const STAGED = 3;

/** @param restUtcS a receiver's time at which the surveying car stood before its start */
export function highwayCourse(survey: HighwayTrack, restUtcS: number): HighwayCourse {
  const line = survey.distanceAt(restUtcS) + STAGED;
  const checkpoints = KM.map(([id, duty, km]): Checkpoint => {
    const name = `${id.slice(0, 1).toUpperCase()}${id.slice(1)}`;
    return { id, name, duty, at: { text: km.toFixed(3), unit: 'km' }, source: 'official', side: null, note: '', position: null };
  });
  const gates = new Map(KM.map(([id, , km]) => [id, { ...gateAt(survey, line + km * 1000), surveyed: line + km * 1000 }]));
  const book: CourseBook = {
    id: 'recorded-road',
    version: 1,
    name: 'Recorded road',
    unit: 'km',
    checkpoints,
    zones: [],
    slowDownLimit: null,
    notes: '',
  };
  return { book, gates };
}

/** One drive over the course. Times are seconds by the recording computer's clock, which is the box's and the session's. */
export interface HighwayRun {
  readonly stagedBehindM: number;
  readonly releaseHostS: number;
  readonly releaseUtcMs: number;
  /** True passings in order of distance, start line included. */
  readonly passings: readonly { readonly checkpoint: string; readonly hostS: number; readonly utcS: number }[];
}

const MOVED_COUNTS = 500;
/** Between the release and the wheel's first movement. */
const REACTION_S = 0.5;

/** @param restUtcS a receiver's time at which the car stood before its start @throws Error where it never passes a line */
export function highwayRun(recording: HighwayRecording, track: HighwayTrack, course: HighwayCourse, restUtcS: number): HighwayRun {
  const restHostS = track.hostAt(restUtcS);
  const rest = recording.encoder.find((row) => row.hostS >= restHostS);
  const moved = recording.encoder.find((row) => row.hostS > restHostS && Math.abs(row.c2 - (rest?.c2 ?? 0)) > MOVED_COUNTS);
  if (moved === undefined) throw new Error('the car never moves');
  const passings = [...course.gates].map(([checkpoint, gate]) => {
    const utcS = passingTime(track, gate);
    if (utcS === null) throw new Error(`${checkpoint} is never passed`);
    return { checkpoint, utcS, hostS: track.hostAt(utcS) };
  });
  const releaseHostS = moved.hostS - REACTION_S;
  const lineUtcS = passings[0]?.utcS ?? Number.NaN;
  return {
    stagedBehindM: track.distanceAt(lineUtcS) - track.distanceAt(restUtcS),
    releaseHostS,
    releaseUtcMs: recording.utcZeroMs + (releaseHostS - (track.hostAt(restUtcS) - restUtcS)) * 1000,
    passings,
  };
}

/** The navigator's touches: the true passings with a lead and scatter, ms. Start and finish are not touched. */
export function highwayTaps(run: HighwayRun, course: HighwayCourse, habits: { seed: number; leadMs: number; scatterMs: number }) {
  const random = createRandom(habits.seed, 'taps');
  const touched = new Set(course.book.checkpoints.filter((c) => c.duty === 'settle' || c.duty === 'scale').map((c) => c.id));
  return run.passings
    .filter((p) => touched.has(p.checkpoint))
    .map((p) => ({ checkpoint: p.checkpoint, hostS: p.hostS + (habits.leadMs + random.gauss(habits.scatterMs)) / 1000 }));
}

export interface HighwayPackOptions {
  readonly mmPerPulse: number;
  readonly scaleSigma: number;
  readonly releaseMs: number;
  readonly stagedBehindM: number;
  readonly leadMs: number;
  readonly scatterMs: number;
  readonly scaleRule: Pack['settings']['scaleRule'];
}

/** 11.5 km at 90 km/h, wheel only. */
export function highwayPack(course: HighwayCourse, options: HighwayPackOptions): Pack {
  return {
    format: 1,
    event: {
      id: 'recorded',
      name: 'Recorded drive',
      place: 'Recorded road',
      timeZone: 'UTC',
      rules: { timeStart: 'scheduled', timeUnitMs: 10, rounding: 'cut', timeBasis: 'elapsed', ties: 'shared', sumOfRuns: 1 },
    },
    team: { id: 'team', name: 'Team' },
    entry: { id: 'entry', number: '1', crew: [] },
    attempt: { id: 'attempt', number: 1, releaseMs: options.releaseMs, stagedBehindM: options.stagedBehindM },
    courseBook: course.book,
    raceClass: {
      id: 'ninety',
      name: 'Ninety',
      targetTimeMs: 460_000,
      sections: [{ kind: 'average', to: { text: '11.500', unit: 'km' }, average: { text: '90', unit: 'km/h' } }],
      cap: { text: '120', unit: 'km/h' },
      floor: null,
      aids: { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false },
    },
    ownCheckpoints: [],
    crewZones: [],
    car: { id: 'van', name: 'Van', dialReadsHighPercent: 3 },
    wheel: {
      setupId: 'rear',
      setupName: 'Right rear',
      channel: 0,
      pulsesPerTurn: 40_960,
      mmPerPulse: options.mmPerPulse,
      scaleSigma: options.scaleSigma,
      scaleSource: 'measured distance',
    },
    plan: { acceleration: 1.2, deceleration: 2, capMargin: 0.02 },
    settings: {
      speedUnit: 'km/h',
      scaleRule: options.scaleRule,
      tapLeadMs: { glass: options.leadMs, wired: 0 },
      tapScatterMs: options.scatterMs,
      buttonSide: 'right',
    },
  };
}
