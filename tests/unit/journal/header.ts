import type { Pack } from '#shared/course/pack.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';

/** A short invented course: 2 km at 90 km/h, one scale place, 80 s. */
export const PACK: Pack = {
  format: 1,
  event: {
    id: 'event-1',
    name: 'Harrow Lane Dash',
    place: 'Nether Harrow',
    timeZone: 'Europe/London',
    rules: { timeStart: 'scheduled', timeUnitMs: 1000, rounding: 'cut', timeBasis: 'elapsed', ties: 'shared', sumOfRuns: 1 },
  },
  team: { id: 'team-1', name: 'Juniper Row' },
  entry: { id: 'entry-1', number: '17', crew: [{ name: 'Mara Quill', role: 'navigator' }] },
  attempt: { id: 'attempt-1', number: 1, releaseMs: 1_800_000_060_000, stagedBehindM: 0 },
  courseBook: {
    id: 'book-1',
    version: 1,
    name: 'Harrow Lane',
    unit: 'km',
    checkpoints: [
      place('start', 'Start', 'start', '0.000'),
      place('barn', 'Red barn', 'settle', '0.500'),
      place('bridge', 'Stone bridge', 'scale', '1.400'),
      place('finish', 'Finish', 'finish', '2.000'),
    ],
    zones: [],
    slowDownLimit: null,
    notes: '',
  },
  raceClass: {
    id: 'class-1',
    name: 'Ninety',
    targetTimeMs: 80_000,
    sections: [{ kind: 'average', to: { text: '2.000', unit: 'km' }, average: { text: '90', unit: 'km/h' } }],
    cap: { text: '130', unit: 'km/h' },
    floor: null,
    aids: { wheel: true, gnssSpeed: true, gnssPosition: false, dataLink: false },
  },
  ownCheckpoints: [],
  crewZones: [],
  car: { id: 'car-1', name: 'Heron', dialReadsHighPercent: 3 },
  wheel: {
    setupId: 'wheel-1',
    setupName: 'Front left',
    channel: 1,
    pulsesPerTurn: 4,
    mmPerPulse: 500,
    scaleSigma: 0.003,
    scaleSource: 'measured distance',
  },
  plan: { acceleration: 2.5, deceleration: 3, capMargin: 0.02 },
  settings: { speedUnit: 'km/h', scaleRule: 'ratio', tapLeadMs: { glass: 0, wired: 0 }, tapScatterMs: 80, buttonSide: 'right' },
};

function place(id: string, name: string, duty: 'start' | 'settle' | 'scale' | 'finish', km: string) {
  return { id, name, duty, at: { text: km, unit: 'km' }, source: 'official', side: null, note: '', position: null } as const;
}

export const HEADER: RunHeader = {
  format: 'evenline-journal',
  version: 1,
  runId: '0199b0aa-0000-7000-8000-000000000001',
  deviceId: 'tablet-1',
  entryId: 'entry-1',
  attemptId: 'attempt-1',
  packDigest: 'ab'.repeat(32),
  pack: PACK,
  clockRate: 1,
  practice: false,
  createdMs: 1_800_000_000_000,
  appVersion: '0.1.0',
};
