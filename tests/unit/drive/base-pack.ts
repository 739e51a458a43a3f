import type { Checkpoint, Duty, Zone } from '#shared/course/course-book.ts';
import type { Pack } from '#shared/course/pack.ts';

/** An invented 120 km course at 180 km/h with five limits and seven places, for drives in tests. */

const km = (value: number) => ({ text: value.toFixed(3), unit: 'km' as const });
const kmh = (value: number) => ({ text: value.toFixed(1), unit: 'km/h' as const });

export const checkpoint = (id: string, duty: Duty, at: number): Checkpoint => ({
  id,
  name: id,
  duty,
  at: km(at),
  source: duty === 'start' || duty === 'finish' || duty === 'stop board' ? 'official' : 'own',
  side: null,
  note: '',
  position: null,
});

const zone = (id: string, from: number, to: number, metresPerSecond: number): Zone => ({
  id,
  name: id,
  from: km(from),
  to: km(to),
  limit: kmh(metresPerSecond * 3.6),
  source: 'official',
});

const ENDS = [checkpoint('start', 'start', 0), checkpoint('finish', 'finish', 120), checkpoint('stop', 'stop board', 121.5)];
const PLACES = [12, 27, 45, 60, 78, 92, 108].map((at, i) => checkpoint(`place-${i + 1}`, i === 0 ? 'settle' : 'scale', at));

const COURSE: Pick<Pack, 'courseBook' | 'raceClass' | 'ownCheckpoints' | 'crewZones'> = {
  courseBook: {
    id: 'book',
    version: 1,
    name: 'Long plain',
    unit: 'km',
    checkpoints: ENDS,
    zones: [zone('z1', 18, 19, 35), zone('z2', 40, 40.6, 28), zone('z3', 70, 72, 40), zone('z4', 100, 100.8, 32)],
    slowDownLimit: kmh(80),
    notes: '',
  },
  raceClass: {
    id: 'class',
    name: '180',
    targetTimeMs: 2_400_000,
    sections: [{ kind: 'average', to: km(120), average: kmh(180) }],
    cap: kmh(58 * 3.6),
    floor: null,
    aids: { wheel: true, gnssSpeed: true, gnssPosition: true, dataLink: false },
  },
  ownCheckpoints: PLACES,
  crewZones: [],
};

const EVENT: Pack['event'] = {
  id: 'event',
  name: 'Trial',
  place: 'Nowhere',
  timeZone: 'UTC',
  rules: { timeStart: 'scheduled', timeUnitMs: 1, rounding: 'cut', timeBasis: 'elapsed', ties: 'shared', sumOfRuns: 1 },
};

export const BASE_PACK: Pack = {
  format: 1,
  event: EVENT,
  team: { id: 'team', name: 'Team' },
  entry: { id: 'entry', number: '7', crew: [] },
  attempt: { id: 'attempt', number: 1, releaseMs: null, stagedBehindM: 3 },
  ...COURSE,
  car: { id: 'car', name: 'Car', dialReadsHighPercent: 3 },
  wheel: { setupId: 'w', setupName: 'W', channel: 0, pulsesPerTurn: 4, mmPerPulse: 500, scaleSigma: 0.003, scaleSource: 'nominal' },
  plan: { acceleration: 2.5, deceleration: 4, capMargin: 0.02 },
  settings: { speedUnit: 'km/h', scaleRule: 'gain', tapLeadMs: { glass: 0, wired: 0 }, tapScatterMs: 100, buttonSide: 'right' },
};

/** Twelve kilometres of the same kind with no limits and seven places, where many drives are wanted. */
export const SHORT_PACK: Pack = {
  ...BASE_PACK,
  courseBook: { ...BASE_PACK.courseBook, checkpoints: [checkpoint('start', 'start', 0), checkpoint('finish', 'finish', 12)], zones: [] },
  raceClass: { ...BASE_PACK.raceClass, targetTimeMs: 240_000, sections: [{ kind: 'average', to: km(12), average: kmh(180) }] },
  ownCheckpoints: [2, 3.5, 5, 6.5, 8, 9.5, 11].map((at, i) => checkpoint(`place-${i + 1}`, i === 0 ? 'settle' : 'scale', at)),
};

/** Forty kilometres at 40 m/s with three places and one limit, wheel only: the setting of which simulations of the ratio rule are known. */
export const FORTY_PACK: Pack = {
  ...BASE_PACK,
  courseBook: {
    ...BASE_PACK.courseBook,
    checkpoints: [checkpoint('start', 'start', 0), checkpoint('finish', 'finish', 40), checkpoint('stop', 'stop board', 41)],
    zones: [zone('z1', 18, 19, 25)],
  },
  raceClass: {
    ...BASE_PACK.raceClass,
    targetTimeMs: 1_000_000,
    sections: [{ kind: 'average', to: km(40), average: kmh(144) }],
    cap: kmh(48 * 3.6),
    aids: { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false },
  },
  ownCheckpoints: [10, 20, 30].map((at, i) => checkpoint(`place-${i + 1}`, i === 0 ? 'settle' : 'scale', at)),
  settings: { ...BASE_PACK.settings, scaleRule: 'ratio' },
};
