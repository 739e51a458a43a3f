import type { CourseContent } from '#server/services/course-books/publish-course-book.ts';
import type { Checkpoint, Duty } from '#shared/course/course-book.ts';
import type { EventRules, RaceClass } from '#shared/course/race-class.ts';

/** An invented course for a team that has none yet: long enough to learn on, short enough to drive twice. */
const place = (id: string, name: string, duty: Duty, km: string, note = ''): Checkpoint => ({
  id,
  name,
  duty,
  at: { text: km, unit: 'km' },
  source: 'official',
  side: null,
  note,
  position: null,
});

export const PRACTICE_COURSE: CourseContent = {
  name: 'Practice loop',
  unit: 'km',
  checkpoints: [
    place('start', 'Start', 'start', '0.000'),
    place('culvert', 'Culvert rail', 'settle', '2.150', 'First rail, near end. Tyres are still warming: the scale is left alone.'),
    place('barn', 'Long barn', 'scale', '6.480', 'Far corner of the barn'),
    place('bridge', 'Stone bridge', 'scale', '11.920', 'Expansion joint on the near side'),
    place('mast', 'Radio mast', 'scale', '17.360', 'Foot of the mast, level with the door'),
    place('lane', 'Lane end', 'place', '21.700', 'Sign post of the lane'),
    place('finish', 'Finish', 'finish', '24.000'),
    place('stop', 'Stop board', 'stop board', '25.200'),
  ],
  zones: [
    {
      id: 'hamlet',
      name: 'Hamlet',
      from: { text: '8.300', unit: 'km' },
      to: { text: '8.900', unit: 'km' },
      limit: { text: '60', unit: 'km/h' },
      source: 'official',
    },
  ],
  slowDownLimit: { text: '80', unit: 'km/h' },
  notes: 'Invented for practice. There is no such road.',
};

export const PRACTICE_RULES: EventRules = {
  timeStart: 'scheduled',
  timeUnitMs: 10,
  rounding: 'cut',
  timeBasis: 'elapsed',
  ties: 'shared',
  sumOfRuns: 1,
};

/** 24 km at 144 km/h: ten minutes. */
export const PRACTICE_CLASS: Omit<RaceClass, 'id'> = {
  name: 'Practice 144',
  targetTimeMs: 600_000,
  sections: [{ kind: 'average', to: { text: '24.000', unit: 'km' }, average: { text: '144', unit: 'km/h' } }],
  cap: { text: '200', unit: 'km/h' },
  floor: null,
  aids: { wheel: true, gnssSpeed: true, gnssPosition: true, dataLink: true },
};
