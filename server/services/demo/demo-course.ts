import type { CourseContent } from '#server/services/course-books/publish-course-book.ts';
import type { Checkpoint, Duty, Zone } from '#shared/course/course-book.ts';
import type { EventRules, RaceClass } from '#shared/course/race-class.ts';
import { demoPosition, surveyedLine } from './demo-road.ts';

/** 61 km out in the morning, the same road back in the afternoon, surveyed. Every name is invented; there is no such road. */

const LENGTH_M = 61_000;
const STOP_BOARD_M = 1400;
/** The survey begins this far before the start and ends this far after the stop board. */
const SURVEYED_BEYOND_M = 200;

interface Place {
  readonly id: string;
  readonly name: string;
  readonly duty: Duty;
  readonly m: number;
  readonly side: 'left' | 'right' | null;
  readonly note: string;
}

const OFFICIAL: readonly Place[] = [
  { id: 'mill', name: 'Lumsey Mill', duty: 'place', m: 14_620, side: 'left', note: 'Post at the mill gate' },
  { id: 'bridge', name: 'Ossel Bridge', duty: 'scale', m: 30_480, side: 'right', note: 'Board on the bridge rail' },
  { id: 'cross', name: 'Pellin Cross', duty: 'scale', m: 45_910, side: 'left', note: 'Foot of the stone cross' },
];

/** The crew's own places from its recce: better edges than the office prints. */
const OWN: readonly Place[] = [
  { id: 'own-gate', name: 'White gate', duty: 'scale', m: 3240, side: 'right', note: 'Hinge post, not the latch' },
  { id: 'own-silo', name: 'Twin silos', duty: 'scale', m: 9870, side: 'left', note: 'Near edge of the second silo' },
  { id: 'own-culvert', name: 'Culvert rail', duty: 'scale', m: 23_560, side: 'right', note: 'First upright of the rail' },
  { id: 'own-chapel', name: 'Red chapel', duty: 'scale', m: 36_720, side: 'left', note: 'Corner stone, far side' },
  { id: 'own-pylon', name: 'Pylon crossing', duty: 'scale', m: 52_300, side: null, note: 'Under the lowest wire' },
  { id: 'own-kiln', name: 'Old kiln', duty: 'scale', m: 57_760, side: 'right', note: 'Chimney in line with the wall' },
];

const ZONES: readonly { readonly id: string; readonly name: string; readonly from: number; readonly to: number; readonly limit: string }[] =
  [
    { id: 'village', name: 'Brackenhow', from: 18_200, to: 19_100, limit: '60' },
    { id: 'works', name: 'Quarrow works', from: 47_300, to: 48_100, limit: '90' },
  ];

type Way = 'out' | 'back';
const along = (way: Way, m: number): number => (way === 'out' ? m : LENGTH_M - m);
const km = (m: number) => ({ text: (m / 1000).toFixed(3), unit: 'km' as const });
const FLIPPED = { left: 'right', right: 'left' } as const;

function checkpoint(way: Way, source: 'official' | 'own', { m, side, ...place }: Place): Checkpoint {
  return {
    ...place,
    at: km(along(way, m)),
    source,
    side: way === 'out' || side === null ? side : FLIPPED[side],
    position: source === 'own' ? null : demoPosition(m),
  };
}

const byDistance = (a: Checkpoint, b: Checkpoint): number => Number(a.at.text) - Number(b.at.text);

export function courseContent(way: Way): CourseContent {
  const [from, to] = way === 'out' ? ['Tarsel', 'Quarrow'] : ['Quarrow', 'Tarsel'];
  const line = (id: string, name: string, duty: Duty, d: number): Checkpoint =>
    checkpoint(way, 'official', { id, name, duty, m: along(way, d), side: null, note: '' });
  return {
    name: `${from} to ${to}`,
    unit: 'km',
    checkpoints: [
      line('start', `${from} start`, 'start', 0),
      ...OFFICIAL.map((place) => checkpoint(way, 'official', place)).sort(byDistance),
      line('finish', `${to} finish`, 'finish', LENGTH_M),
      line('stop', 'Stop board', 'stop board', LENGTH_M + STOP_BOARD_M),
    ],
    zones: ZONES.map(({ id, name, from: a, to: b, limit }): Zone => {
      const [zoneFrom, zoneTo] = [along(way, a), along(way, b)].sort((x, y) => x - y) as [number, number];
      return { id, name, from: km(zoneFrom), to: km(zoneTo), limit: { text: limit, unit: 'km/h' }, source: 'official' };
    }).sort((x, y) => Number(x.from.text) - Number(y.from.text)),
    slowDownLimit: { text: '80', unit: 'km/h' },
    notes: 'Road closed from 08:30. Flags at both ends of each zone. Keep right on the slow-down stretch.',
    geometry: surveyedLine(-SURVEYED_BEYOND_M, LENGTH_M + STOP_BOARD_M + SURVEYED_BEYOND_M, (d) => along(way, d)),
  };
}

/** The crew's layer over a book. The first place of the way settles only: the tyres are still warming. */
export function ownPlaces(way: Way): readonly Checkpoint[] {
  const places = OWN.map((place) => checkpoint(way, 'own', place)).sort(byDistance);
  return places.map((place, i) => (i === 0 ? { ...place, duty: 'settle' as const } : place));
}

export const DEMO_RULES: EventRules = {
  timeStart: 'scheduled',
  timeUnitMs: 10,
  rounding: 'cut',
  timeBasis: 'elapsed',
  ties: 'shared',
  sumOfRuns: 4,
};

const finish = km(LENGTH_M);

/** 61 km at 180 km/h: 20 min 20 s. */
export const TOURING_180: Omit<RaceClass, 'id'> = {
  name: 'Touring 180',
  targetTimeMs: 1_220_000,
  sections: [{ kind: 'average', to: finish, average: { text: '180', unit: 'km/h' } }],
  cap: { text: '230', unit: 'km/h' },
  floor: null,
  aids: { wheel: true, gnssSpeed: true, gnssPosition: true, dataLink: false },
};

/** 61 km at 150 km/h: 24 min 24 s, with nothing but a clock and the table. */
export const VINTAGE_150: Omit<RaceClass, 'id'> = {
  name: 'Vintage 150, clock and table',
  targetTimeMs: 1_464_000,
  sections: [{ kind: 'average', to: finish, average: { text: '150', unit: 'km/h' } }],
  cap: { text: '190', unit: 'km/h' },
  floor: null,
  aids: { wheel: false, gnssSpeed: false, gnssPosition: false, dataLink: false },
};
