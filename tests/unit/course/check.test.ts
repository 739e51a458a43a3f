import { describe, expect, it } from 'vitest';
import { checkCourseBook, checkRaceClass } from '#shared/course/check.ts';
import type { CourseBook } from '#shared/course/course-book.ts';
import type { RaceClass } from '#shared/course/race-class.ts';
import { book, km, pack, place } from '#tests/unit/pace/packs.ts';

const zone = { id: 'z', name: 'Village', from: km('5'), to: km('6'), limit: { text: '60', unit: 'km/h' }, source: 'official' } as const;
const codes = (b: CourseBook): string[] => checkCourseBook(b).map((f) => `${f.code} ${f.where}`);
const withPlaces = (...checkpoints: CourseBook['checkpoints']): CourseBook => ({ ...book, checkpoints });
const start = place('s', 'start', '0');
const finish = place('f', 'finish', '30');

describe('course book', () => {
  it('a sound book has no fault', () => {
    expect(checkCourseBook({ ...book, zones: [zone] })).toEqual([]);
  });

  it('checkpoints out of order or at one place name both', () => {
    const faults = checkCourseBook(
      withPlaces(start, place('b', 'scale', '12'), place('a', 'place', '11.5'), place('c', 'place', '11.5'), finish),
    );
    expect(faults.map((f) => f.where)).toEqual(['checkpoints[2].at', 'checkpoints[3].at']);
    expect(faults[0]?.message).toContain('"Place a" at 11.5 km does not lie after "Place b" at 12 km');
    expect(faults.every((f) => f.code === 'OUT_OF_ORDER' && f.severity === 'error')).toBe(true);
  });

  it('start, finish and stop board where they belong', () => {
    expect(codes(withPlaces(place('s', 'start', '0.1'), finish))).toEqual(['NO_START checkpoints[0]']);
    expect(codes(withPlaces(place('p', 'place', '0'), finish))).toEqual(['NO_START checkpoints[0]']);
    expect(codes(withPlaces(start, place('s2', 'start', '1'), finish))).toEqual(['NO_START checkpoints[1].duty']);
    expect(codes(withPlaces(start, place('p', 'place', '1')))).toEqual(['NO_FINISH checkpoints']);
    expect(codes(withPlaces(start, finish, place('g', 'finish', '31')))).toEqual(['SEVERAL_FINISHES checkpoints[2].duty']);
    expect(codes(withPlaces(start, finish, place('p', 'place', '31')))).toEqual(['AFTER_FINISH checkpoints[2].duty']);
    expect(codes(withPlaces(start, place('b', 'stop board', '3'), finish))).toEqual(['STOP_BOARD_BEFORE_FINISH checkpoints[1].duty']);
    expect(codes(withPlaces())).toContain('NO_FINISH checkpoints');
  });

  it('ids, names, decimals and positions', () => {
    expect(codes(withPlaces(start, place('a', 'place', '1'), place('a', 'place', '2'), finish))).toEqual([
      'DUPLICATE_ID checkpoints[2].id',
    ]);
    expect(codes(withPlaces(start, place('a', 'place', '1,5'), finish))).toEqual(['BAD_DISTANCE checkpoints[1].at']);
    expect(codes(withPlaces(start, { ...place('a', 'place', '1'), name: ' ' }, finish))).toEqual(['MISSING_TEXT checkpoints[1].name']);
    expect(codes(withPlaces(start, { ...place('a', 'place', '1'), position: { lat: 91, lon: 0 } }, finish))).toEqual([
      'BAD_POSITION checkpoints[1].position',
    ]);
    expect(codes({ ...book, slowDownLimit: { text: '0', unit: 'km/h' } })).toEqual(['BAD_SPEED slowDownLimit']);
  });

  it('zones', () => {
    expect(codes({ ...book, zones: [{ ...zone, from: km('6') }] })).toEqual(['ZONE_REVERSED zones[0]']);
    expect(codes({ ...book, zones: [{ ...zone, to: km('30.001') }] })).toEqual(['ZONE_OUTSIDE zones[0].to']);
    expect(codes({ ...book, zones: [{ ...zone, limit: { text: '0', unit: 'km/h' } }] })).toEqual(['BAD_SPEED zones[0].limit']);
    expect(codes({ ...book, zones: [zone, zone] })).toEqual(['DUPLICATE_ID zones[1].id']);
  });

  it('reports every fault, not the first', () => {
    expect(codes(withPlaces(start, place('a', 'place', 'x'), place('a', 'place', '2'), place('b', 'place', '1'), finish))).toHaveLength(3);
  });
});

describe('class', () => {
  const check = (change: Partial<RaceClass>): string[] =>
    checkRaceClass(book, { ...pack.raceClass, ...change }).map((f) => `${f.code} ${f.severity}`);

  it('a sound class has no fault', () => {
    expect(check({})).toEqual([]);
  });

  it('a target time that the sections do not add up to is a caution with the difference', () => {
    const faults = checkRaceClass(book, { ...pack.raceClass, targetTimeMs: 747_500 });
    expect(faults).toHaveLength(1);
    expect(faults[0]).toMatchObject({ code: 'TARGET_DIFFERS', severity: 'caution', where: 'targetTimeMs' });
    expect(faults[0]?.message).toContain('2.500 s less than the sections add up to');
  });

  it('sections, times and speeds', () => {
    expect(check({ sections: [] })).toEqual(['SECTIONS_END error']);
    expect(check({ sections: [{ kind: 'average', to: km('29'), average: { text: '144', unit: 'km/h' } }] })).toEqual([
      'SECTIONS_END error',
    ]);
    expect(
      check({
        sections: [
          { kind: 'average', to: km('20'), average: { text: '144', unit: 'km/h' } },
          { kind: 'neutral', to: km('20'), timeMs: 0 },
          { kind: 'average', to: km('30'), average: { text: '144', unit: 'km/h' } },
        ],
      }),
    ).toEqual(['OUT_OF_ORDER error', 'BAD_TIME error']);
    expect(check({ targetTimeMs: 0.5 })).toContain('BAD_TIME error');
    expect(check({ floor: { text: '190', unit: 'km/h' } })).toContain('FLOOR_ABOVE_CAP error');
    expect(check({ cap: { text: '140', unit: 'km/h' } })).toEqual(['AVERAGE_OUT_OF_BOUNDS error']);
    expect(check({ cap: { text: 'fast', unit: 'km/h' } })).toEqual(['BAD_SPEED error']);
  });
});
