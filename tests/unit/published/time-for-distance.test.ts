import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { CourseBook } from '#shared/course/course-book.ts';
import type { Section } from '#shared/course/race-class.ts';
import { makeSchedule, targetTimeAt } from '#shared/pace/schedule.ts';
import type { DistanceUnit } from '#shared/units.ts';
import { pack, place, withClass } from '#tests/unit/pace/packs.ts';

/**
 * Time for a distance at a given average, against whole-number arithmetic: metres, miles and hours are ratios of integers, so
 * the exact time is one too (BigInt). Definitions of the units as in units.test.ts.
 */

const speedUnit = (unit: DistanceUnit) => (unit === 'km' ? ('km/h' as const) : ('mph' as const));
const decimal = (whole: bigint, decimals: number): string => {
  const digits = whole.toString().padStart(decimals + 1, '0');
  return decimals === 0 ? digits : `${digits.slice(0, -decimals)}.${digits.slice(-decimals)}`;
};

interface Stretch {
  /** Thousandths of the unit, from the end of the one before; hundredths of the unit an hour. */
  readonly length: bigint;
  readonly average: bigint;
}

/** Exact picoseconds for whole thousandths of a unit at hundredths of that unit an hour, in one unit: length/average hours. */
const exactPs = ({ length, average }: Stretch): bigint => (length * 100n * 3600n * 10n ** 12n) / (average * 1000n);

function scheduleOf(unit: DistanceUnit, stretches: readonly Stretch[], targetTimeMs: number) {
  let at = 0n;
  const sections = stretches.map((s): Section => {
    at += s.length;
    return { kind: 'average', to: { text: decimal(at, 3), unit }, average: { text: decimal(s.average, 2), unit: speedUnit(unit) } };
  });
  const book: CourseBook = {
    ...pack.courseBook,
    unit,
    checkpoints: [place('start', 'start', '0.000', unit), place('finish', 'finish', decimal(at, 3), unit)],
  };
  return makeSchedule(book, withClass(pack, { targetTimeMs, sections }).raceClass);
}

describe('time for a distance at an average', () => {
  // by hand: 60 units an hour is a unit a minute, in km and in miles
  it.each([
    ['km', '1.000', '60', 60],
    ['mi', '1.000', '60', 60],
    ['km', '90.000', '180', 1800],
    ['km', '61.000', '180', 1220],
    ['mi', '90.000', '100', 3240],
    ['mi', '0.001', '36', 0.1],
  ] as const)('%s: %s at %s takes %d s', (unit, to, average, seconds) => {
    const section: Section = { kind: 'average', to: { text: to, unit }, average: { text: average, unit: speedUnit(unit) } };
    const book = { ...pack.courseBook, unit, checkpoints: [place('start', 'start', '0', unit), place('finish', 'finish', to, unit)] };
    const schedule = makeSchedule(book, withClass(pack, { targetTimeMs: seconds * 1000, sections: [section] }).raceClass);
    expect(Math.abs(schedule.difference)).toBeLessThan(1e-9);
    expect(targetTimeAt(schedule, schedule.finish / 2)).toBeCloseTo(seconds / 2, 9);
  });

  it('the table of any class agrees with whole-number arithmetic to a nanosecond', () => {
    const stretch = fc.record({
      length: fc.bigInt({ min: 100n, max: 60_000n }),
      average: fc.bigInt({ min: 1_000n, max: 30_000n }),
    });
    fc.assert(
      fc.property(fc.constantFrom<DistanceUnit>('km', 'mi'), fc.array(stretch, { minLength: 1, maxLength: 6 }), (unit, stretches) => {
        const exact = stretches.map((s) => Number(exactPs(s)) / 1e12);
        const total = exact.reduce((sum, t) => sum + t, 0);
        const schedule = scheduleOf(unit, stretches, Math.max(1, Math.round(total * 1000)));
        // the official target, in whole milliseconds, decides; the averages are stretched to it by one factor
        expect(schedule.targetTime - schedule.difference).toBeCloseTo(total, 8);
        const factor = schedule.targetTime / total;
        let t = 0;
        schedule.sections.forEach((section, i) => {
          expect(Math.abs(targetTimeAt(schedule, section.from) - t * factor)).toBeLessThan(1e-9 * Math.max(1, total));
          t += exact[i] as number;
        });
        expect(targetTimeAt(schedule, schedule.finish)).toBe(schedule.targetTime);
      }),
      { numRuns: 300 },
    );
  });
});
