import type { Checkpoint, CourseBook, Duty, PrintedDistance } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';

/** Invented courses for the engine's checks. */

export const km = (text: string): PrintedDistance => ({ text, unit: 'km' });

export function place(id: string, duty: Duty, text: string, unit: 'km' | 'mi' = 'km'): Checkpoint {
  return { id, name: `Place ${id}`, duty, at: { text, unit }, source: 'official', side: null, note: '', position: null };
}

export const book: CourseBook = {
  id: 'book-1',
  version: 1,
  name: 'Heron Moor road',
  unit: 'km',
  checkpoints: [
    place('start', 'start', '0.000'),
    place('settle', 'settle', '4.000'),
    place('one', 'scale', '12.000'),
    place('two', 'scale', '24.000'),
    place('three', 'place', '28.000'),
    place('finish', 'finish', '30.000'),
    place('board', 'stop board', '31.400'),
  ],
  zones: [],
  slowDownLimit: { text: '60', unit: 'km/h' },
  notes: '',
};

/** 30 km at 144 km/h = 40 m/s: 750 s. Quarter-metre pulses. */
export const pack: Pack = {
  format: 1,
  event: {
    id: 'event-1',
    name: 'Heron Moor trial',
    place: 'Heron Moor',
    timeZone: 'Europe/Dublin',
    rules: { timeStart: 'scheduled', timeUnitMs: 10, rounding: 'cut', timeBasis: 'elapsed', ties: 'shared', sumOfRuns: 1 },
  },
  team: { id: 'team-1', name: 'Curlew' },
  entry: { id: 'entry-1', number: '7', crew: [] },
  attempt: { id: 'attempt-1', number: 1, releaseMs: 1_800_000_000_000, stagedBehindM: 0 },
  courseBook: book,
  raceClass: {
    id: 'class-1',
    name: '144 km/h',
    targetTimeMs: 750_000,
    sections: [{ kind: 'average', to: km('30.000'), average: { text: '144', unit: 'km/h' } }],
    cap: { text: '180', unit: 'km/h' },
    floor: null,
    aids: { wheel: true, gnssSpeed: true, gnssPosition: true, dataLink: false },
  },
  ownCheckpoints: [],
  crewZones: [],
  car: { id: 'car-1', name: 'Wren', dialReadsHighPercent: 3 },
  wheel: {
    setupId: 'wheel-1',
    setupName: 'undriven left',
    channel: 0,
    pulsesPerTurn: 8,
    mmPerPulse: 250,
    scaleSigma: 0.003,
    scaleSource: 'nominal',
  },
  plan: { acceleration: 2.5, deceleration: 4, capMargin: 0.02 },
  settings: { speedUnit: 'km/h', scaleRule: 'ratio', tapLeadMs: { glass: 0, wired: 0 }, tapScatterMs: 100, buttonSide: 'right' },
};

export const headerOf = (p: Pack): RunHeader => ({
  format: 'evenline-journal',
  version: 1,
  runId: '018f0000-0000-7000-8000-000000000001',
  deviceId: 'device-1',
  entryId: p.entry.id,
  attemptId: p.attempt.id,
  packDigest: '0'.repeat(64),
  pack: p,
  clockRate: 1,
  practice: true,
  createdMs: 1_799_999_000_000,
  appVersion: '0.1.0',
});

export const withSettings = (p: Pack, settings: Partial<Pack['settings']>): Pack => ({ ...p, settings: { ...p.settings, ...settings } });
export const withClass = (p: Pack, raceClass: Partial<Pack['raceClass']>): Pack => ({ ...p, raceClass: { ...p.raceClass, ...raceClass } });
