import { describe, expect, it } from 'vitest';
import { makeOdometer, type Odometer } from '#shared/pace/odometer.ts';
import { takePulse } from '#shared/pace/wheel-source.ts';
import { copyPlain } from '#tests/unit/pace/copy-plain.ts';
import type { Motion } from '#tests/unit/pace/drives.ts';
import { merged, metresOf, pieces, records, roll, type Sensor, shown } from '#tests/unit/pace/faulty-sensor.ts';

const WHEELS = { channel: 0, secondChannel: 1 };
const FIRST: Sensor = { hz: 20, metresPerPulse: 0.25 };
const SECOND: Sensor = { hz: 20, metresPerPulse: 0.4, channel: 1, phase: 0.3 };
/** 25 m/s after a standing start. */
const drive = pieces([2, 0], [10, 2.5]);
const both = (motion: Motion, until: number, first: Partial<Sensor> = {}, second: Partial<Sensor> = {}, other: Motion = motion) =>
  merged(records(motion, until, { ...FIRST, ...first }), records(other, until, { ...SECOND, ...second }));
const plus = (motion: Motion, extra: (metres: number) => number): Motion => ({
  metresAt: (t) => motion.metresAt(t) + extra(motion.metresAt(t)),
});

describe('two wheels compared', () => {
  it.each([
    ['the same way round', 0.4, 1, 1.6],
    ['mounted mirrored', 0.4, -1, -1.6],
    ['many pulses a metre', 1 / 20_180, 1, 4 / 20_180],
    ['one pulse a turn', 2, 1, 8],
  ])('learns what a count of the second is worth: %s', (_, metresPerPulse, sign, ratio) => {
    const o = roll(both(drive, 150, {}, { metresPerPulse, sign }), 0.25, WHEELS);
    expect(Math.abs((o.second.pair.ratio as number) / ratio - 1)).toBeLessThan(0.005);
    expect(o.second.pair.disagreements).toBe(0);
    expect(o.second.standIns).toBe(0);
    expect(metresOf(o, 0.25)).toBe(o.wheel.total * 0.25);
  });

  it('a tyre that grows slowly, and left against right by 0.18 %, are no disagreement', () => {
    const other = plus(drive, (x) => 0.0018 * x + 1e-7 * x * x);
    expect(roll(both(drive, 300, {}, {}, other), 0.25, WHEELS).second.pair.disagreements).toBe(0);
  });

  it('neither is a hairpin, wherever in a stretch it lies: the outer wheel goes 4.7 m further over 25 m', () => {
    for (let begin = 1_000; begin < 1_100; begin += 9) {
      const other = plus(drive, (x) => 4.7 * Math.min(1, Math.max(0, (x - begin) / 25)));
      const o = roll(both(drive, 150, {}, {}, other), 0.25, WHEELS);
      expect(o.second.pair.disagreements).toBe(0);
    }
  });

  it('neither is a motorway ramp: 270 degrees to the same side over 500 m', () => {
    const other = plus(drive, (x) => 7.5 * Math.min(1, Math.max(0, (x - 1_000) / 500)));
    expect(roll(both(drive, 150, {}, {}, other), 0.25, WHEELS).second.pair.disagreements).toBe(0);
  });

  it.each([0.015, -0.015])('one that slips by %d from somewhere on is told within 1.3 km, once, and for as long as it lasts', (share) => {
    const motion = plus(drive, (x) => share * Math.max(0, Math.min(2_000, x - 2_000)));
    const list = both(motion, 200, {}, {}, drive);
    const o = makeOdometer();
    o.track.perCount = 0.25;
    const seen: boolean[] = [];
    for (const record of list) {
      takePulse(o, record, WHEELS, { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink: false }, 0.25);
      seen[Math.floor(metresOf(o, 0.25) / 100)] = o.second.pair.disagree;
    }
    expect(seen.slice(0, 20)).not.toContain(true);
    expect(seen.slice(33, 39)).not.toContain(false);
    expect(seen.slice(42)).not.toContain(true);
    expect(o.second.pair.disagreements).toBe(1);
  });
});

describe('the second wheel stands in', () => {
  const times = Array.from({ length: 400 }, (_, i) => 59 + i * 0.05);

  it.each([
    ['its count freezes', { misses: [[60, 72]] as const }],
    ['it falls silent, and its count with it', { misses: [[60, 72]] as const, silent: [[60, 72]] as const }],
    ['its records are lost', { silent: [[60, 72]] as const }],
  ])('where %s; no jump at either end', (_, fault) => {
    // brakes to 10 m/s meanwhile: no carrying on at the last speed would do
    const motion = pieces([2, 0], [10, 2.5], [50, 0], [3, -5], [60, 0]);
    const list = both(motion, 90, fault);
    const looks = shown(list, 0.25, times, WHEELS);
    looks.forEach((now, i) => {
      expect(now.source).toBe('wheel');
      expect(Math.abs(now.metres - motion.metresAt(times[i] as number))).toBeLessThan((times[i] as number) > 62 ? 1.3 : 2.5);
      // two records' way and a pulse
      if (i > 0) expect(Math.abs(now.metres - (looks[i - 1] as typeof now).metres)).toBeLessThan(2 * 25 * 0.05 + 0.25);
    });
    const o = roll(list, 0.25, WHEELS);
    expect(o.second.standIns).toBe(1);
    expect(o.fills.count).toBe(0);
    expect(o.second.standing).toBeNull();
    expect(Math.abs(o.second.standInMetres - (motion.metresAt(72) - motion.metresAt(60)))).toBeLessThan(15);
    expect(Math.abs(metresOf(o, 0.25) - motion.metresAt(90))).toBeLessThan(1.3);
  });

  it('a record lost in a count that went on costs nothing in the end', () => {
    const o = roll(both(drive, 90, { silent: [[60, 72]] }), 0.25, WHEELS);
    expect(o.w).toBe(o.wheel.total);
  });

  it('not where both stand: a car at rest, or one that locks its wheels', () => {
    const stop = pieces([2, 0], [10, 2.5], [50, 0], [3, -8.33]);
    expect(roll(both(stop, 90), 0.25, WHEELS).second.standIns).toBe(0);
    const o = roll(both(drive, 90, { misses: [[60, 60.6]] }, { misses: [[60, 60.6]] }), 0.25, WHEELS);
    expect(o.second.standIns).toBe(0);
    expect(o.fills.count).toBe(1);
    expect(Math.abs(metresOf(o, 0.25) - drive.metresAt(90))).toBeLessThan(1);
  });

  it('not before it is known what its counts are worth', () => {
    const o = roll(both(drive, 40, { misses: [[14, 15]] }), 0.25, WHEELS);
    expect(o.second.standIns).toBe(0);
    expect(o.fills.count).toBe(1);
  });

  it('gives the same bits, stopped and taken up again anywhere', () => {
    const list = both(drive, 75, { misses: [[60, 66]] });
    const whole: Odometer = roll(list, 0.25, WHEELS);
    expect(whole.second.standIns).toBe(1);
    for (let cut = list.length - 700; cut < list.length; cut += 13) {
      expect(roll(list.slice(cut), 0.25, WHEELS, copyPlain(roll(list.slice(0, cut), 0.25, WHEELS)))).toEqual(whole);
    }
  });
});
