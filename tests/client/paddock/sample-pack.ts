import type { Checkpoint, CourseBook } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';
import type { RaceClass } from '#shared/course/race-class.ts';

/** An invented course of 61 km with two limits, and a pack over it. */
export const IDS = {
  user: '0198c000-0000-7000-8000-000000000001',
  team: '0198c000-0000-7000-8000-000000000002',
  event: '0198c000-0000-7000-8000-000000000003',
  entry: '0198c000-0000-7000-8000-000000000004',
  morning: '0198c000-0000-7000-8000-000000000005',
  afternoon: '0198c000-0000-7000-8000-000000000006',
  book: '0198c000-0000-7000-8000-000000000007',
  raceClass: '0198c000-0000-7000-8000-000000000008',
  car: '0198c000-0000-7000-8000-000000000009',
  setup: '0198c000-0000-7000-8000-00000000000a',
  run: '0198c000-0000-7000-8000-00000000000b',
  secondRun: '0198c000-0000-7000-8000-00000000000c',
} as const;

const km = (text: string) => ({ text, unit: 'km' as const });
const place = (id: string, name: string, duty: Checkpoint['duty'], at: string, more: Partial<Checkpoint> = {}): Checkpoint => ({
  id,
  name,
  duty,
  at: km(at),
  source: 'official',
  side: null,
  note: '',
  position: null,
  ...more,
});

export const sampleBook: CourseBook = {
  id: IDS.book,
  version: 3,
  name: 'Lark Valley out',
  unit: 'km',
  checkpoints: [
    place('start', 'Start', 'start', '0.000'),
    place('finish', 'Finish', 'finish', '61.000'),
    place('board', 'Stop board', 'stop board', '62.400'),
  ],
  zones: [
    { id: 'z1', name: 'Hollin village', from: km('18.200'), to: km('19.100'), limit: { text: '120', unit: 'km/h' }, source: 'official' },
    { id: 'z2', name: 'Tarn bridge', from: km('44.500'), to: km('44.900'), limit: { text: '90', unit: 'km/h' }, source: 'official' },
  ],
  slowDownLimit: { text: '60', unit: 'km/h' },
  notes: '',
};

export const sampleClass: RaceClass = {
  id: IDS.raceClass,
  name: '180',
  targetTimeMs: 1_220_000,
  sections: [{ kind: 'average', to: km('61.000'), average: { text: '180', unit: 'km/h' } }],
  cap: { text: '220', unit: 'km/h' },
  floor: { text: '60', unit: 'km/h' },
  aids: { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false },
};

export const samplePack: Pack = {
  format: 1,
  event: {
    id: IDS.event,
    name: 'Lark Valley Run',
    place: 'Hollin',
    timeZone: 'Europe/Vienna',
    rules: { timeStart: 'scheduled', timeUnitMs: 10, rounding: 'cut', timeBasis: 'clock', ties: 'shared', sumOfRuns: 2 },
  },
  team: { id: IDS.team, name: 'Fernhill' },
  entry: {
    id: IDS.entry,
    number: '27',
    crew: [
      { name: 'Ida Marlow', role: 'navigator' },
      { name: 'Tom Reyne', role: 'driver' },
    ],
  },
  attempt: { id: IDS.morning, number: 1, releaseMs: Date.UTC(2026, 5, 13, 8, 42), stagedBehindM: 3 },
  courseBook: sampleBook,
  raceClass: sampleClass,
  ownCheckpoints: [
    place('quarry', 'Quarry gate, near post', 'settle', '4.310', { source: 'own', side: 'left', note: 'post meant, not the sign' }),
    place('mill', 'Mill chimney', 'scale', '16.850', { source: 'own', side: 'right' }),
    place('barn', 'Long barn, far edge', 'scale', '31.220', { source: 'own', side: 'left' }),
    place('shrine', 'Wayside shrine', 'place', '46.075', { source: 'own', side: 'right', note: 'hidden until 200 m' }),
    place('mast', 'Radio mast', 'scale', '57.640', { source: 'own', side: 'left' }),
  ],
  crewZones: [],
  car: { id: IDS.car, name: 'Blue estate', dialReadsHighPercent: 3.5 },
  wheel: {
    setupId: IDS.setup,
    setupName: 'Road 19',
    channel: 0,
    pulsesPerTurn: 4,
    mmPerPulse: 512.4,
    scaleSigma: 0.003,
    scaleSource: 'measured distance',
  },
  plan: { acceleration: 2.5, deceleration: 4, capMargin: 0.02 },
  settings: { speedUnit: 'km/h', scaleRule: 'gain', tapLeadMs: { glass: 0, wired: 0 }, tapScatterMs: 100, buttonSide: 'right' },
};
