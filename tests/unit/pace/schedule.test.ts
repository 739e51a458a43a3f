import { describe, expect, it } from 'vitest';
import { makeSchedule, targetSpeedAt, targetTimeAt } from '#shared/pace/schedule.ts';
import { book, km, pack, place } from '#tests/unit/pace/packs.ts';

const raceClass = pack.raceClass;

describe('schedule', () => {
  it('one average: length over average', () => {
    const s = makeSchedule(book, raceClass);
    expect(targetTimeAt(s, 15_000)).toBe(375);
    expect(targetTimeAt(s, 30_000)).toBe(750);
    expect(s.difference).toBe(0);
    expect(targetSpeedAt(s, 3)).toBe(40);
  });

  it('several averages and a neutral section with its own time', () => {
    // 10 km at 36 km/h = 1000 s, 2 km neutral in 400 s, 18 km at 72 km/h = 900 s
    const s = makeSchedule(book, {
      ...raceClass,
      targetTimeMs: 2_300_000,
      sections: [
        { kind: 'average', to: km('10'), average: { text: '36', unit: 'km/h' } },
        { kind: 'neutral', to: km('12'), timeMs: 400_000 },
        { kind: 'average', to: km('30'), average: { text: '72', unit: 'km/h' } },
      ],
    });
    expect(s.difference).toBe(0);
    expect(targetTimeAt(s, 10_000)).toBe(1000);
    expect(targetTimeAt(s, 11_000)).toBeCloseTo(1200, 9);
    expect(targetTimeAt(s, 12_000)).toBeCloseTo(1400, 9);
    expect(targetTimeAt(s, 21_000)).toBeCloseTo(1850, 9);
    expect(targetTimeAt(s, 30_000)).toBe(2300);
  });

  it('the official target time decides; averages stretch, the neutral time does not', () => {
    const s = makeSchedule(book, {
      ...raceClass,
      targetTimeMs: 2_490_000,
      sections: [
        { kind: 'average', to: km('10'), average: { text: '36', unit: 'km/h' } },
        { kind: 'neutral', to: km('12'), timeMs: 400_000 },
        { kind: 'average', to: km('30'), average: { text: '72', unit: 'km/h' } },
      ],
    });
    expect(s.difference).toBeCloseTo(190, 9);
    // 1900 s of averages become 2090: a factor of 1.1
    expect(targetTimeAt(s, 10_000)).toBeCloseTo(1100, 9);
    expect(targetTimeAt(s, 12_000)).toBeCloseTo(1500, 9);
    expect(targetTimeAt(s, 30_000)).toBe(2490);
  });

  it('nothing but a neutral section stretches too', () => {
    const s = makeSchedule(book, { ...raceClass, targetTimeMs: 900_000, sections: [{ kind: 'neutral', to: km('30'), timeMs: 600_000 }] });
    expect(targetTimeAt(s, 15_000)).toBeCloseTo(450, 9);
  });

  it('moved lines and a typed-in target time', () => {
    const s = makeSchedule(book, raceClass, { start: 500, finish: 29_500, targetTimeMs: 725_000 });
    expect(targetTimeAt(s, 500)).toBe(0);
    expect(targetTimeAt(s, 15_000)).toBeCloseTo(362.5, 9);
    expect(targetTimeAt(s, 29_500)).toBe(725);
    expect(() => makeSchedule(book, raceClass, { finish: 0 })).toThrow(RangeError);
  });
});

describe('time for distance at a given average', () => {
  // by definition: international mile 1609.344 m (yard-and-pound agreement of 1959), hour 3600 s; so every figure is a plain fraction
  const rows = [
    ['1', 'mi', '180', 'km/h', 32.18688],
    ['1', 'mi', '100', 'mph', 36],
    ['1', 'mi', '60', 'mph', 60],
    ['90', 'mi', '110', 'mph', 32_400 / 11],
    ['90', 'mi', '95', 'mph', 64_800 / 19],
    ['1', 'km', '180', 'km/h', 20],
    ['61', 'km', '180', 'km/h', 1_220],
    ['120', 'km', '175', 'km/h', 17_280 / 7],
    ['100', 'km', '100', 'mph', 3_600_000 / 1609.344],
    ['33.550', 'mi', '115', 'mph', 24_156 / 23],
  ] as const;

  it.each(rows)('%s %s at %s %s', (length, unit, average, per, expected) => {
    const to = { text: length, unit };
    const s = makeSchedule(
      { ...book, unit, checkpoints: [place('start', 'start', '0', unit), place('finish', 'finish', length, unit)] },
      {
        ...raceClass,
        targetTimeMs: expected * 1000,
        sections: [{ kind: 'average', to, average: { text: average, unit: per } }],
      },
    );
    // the sections alone: what they lack to the target given is nothing
    expect(Math.abs(s.difference)).toBeLessThan(1e-9);
    expect(targetTimeAt(s, s.finish / 2)).toBeCloseTo(expected / 2, 9);
  });
});
