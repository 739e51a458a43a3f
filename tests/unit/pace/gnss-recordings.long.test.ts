import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { NewObservation, PulseV1, Unnumbered } from '#shared/journal/observation.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { odometerNow } from '#shared/pace/odometer-now.ts';
import { journal } from '#tests/unit/pace/drives.ts';
import { feed } from '#tests/unit/pace/gnss-drives.ts';

/** Wheel and GNSS together on recorded drives that nobody on this project made (skipped where they are absent). */
const DATA = new URL('../../../../shared/data/wheel_gnss/', import.meta.url);
const orSkipped = existsSync(DATA) ? '' : ' (skipped: the recordings are not beside this repository)';
const lines = (file: string): string[] =>
  readFileSync(new URL(file, DATA), 'utf8')
    .split('\n')
    .filter((line) => line !== '' && !line.startsWith('#'));
const at = (t: number): number => Math.round(t * 1e6) + 10_000_000;
const seconds = (instant: number): number => (instant - 10_000_000) / 1e6;
const pulse = (t: number, count: number): Pulse => ({
  type: 'pulse.v1',
  at: at(t),
  channel: 0,
  count: count >>> 0,
  boxUs: at(t) % 2 ** 32,
});
type Pulse = Unnumbered<PulseV1>;

function fix(t: number, speed: number | null, utcMs: number, via: 'nmea' | 'geolocation'): NewObservation {
  return { type: 'fix.v1', at: at(t), via, lat: null, lon: null, speed, course: null, accuracy: null, utcMs };
}

function highway(drive: string, hz: number): { wheel: Pulse[]; gnss: NewObservation[] } {
  const wheel = lines(`highway/${drive}_encoder.csv`)
    .slice(1)
    .map((line) => line.split(',').map(Number))
    .map(([t, , count]) => pulse(t as number, count as number));
  let last = Number.NEGATIVE_INFINITY;
  const gnss = lines(`highway/${drive}_gnss.csv`)
    .map((line) => line.split(','))
    .filter(([rx]) => rx === 'RightRear')
    .map(([, host, utc, , , , , , , , kmh]) =>
      fix(Number(host), kmh === '' ? null : Number(kmh) / 3.6, Math.round(Number(utc) * 1000), 'nmea'),
    )
    .filter((o) => {
      const due = o.at - last >= 0.95e6 / hz;
      if (due) last = o.at;
      return due;
    });
  return { wheel, gnss };
}

const DRIVES = ['2024-07-11-12-41-42', '2024-07-11-14-34-05'];
const PER_COUNT = 1 / 20_180;

/** Distance shown at every observation between two instants, by instant. */
function shown(list: readonly NewObservation[], from: number, to: number): { by: Map<number, number>; odometer: Odometer } {
  const by = new Map<number, number>();
  const odometer = feed(journal(list), {
    metresPerPulse: PER_COUNT,
    each: (o, now) => {
      if (seconds(now) < from || seconds(now) > to) return;
      const { w, g } = odometerNow(o, now, PER_COUNT);
      by.set(now, w * PER_COUNT + g);
    },
  });
  return { by, odometer };
}

/** Differences from the untouched run, in order of instant. */
function differences(touched: Map<number, number>, untouched: Map<number, number>): { t: number; off: number }[] {
  return [...touched].flatMap(([now, metres]) => {
    const other = untouched.get(now);
    return other === undefined ? [] : [{ t: seconds(now), off: metres - other }];
  });
}
const worst = (list: readonly { off: number }[]): number => Math.max(...list.map(({ off }) => Math.abs(off)));

describe.skipIf(!existsSync(DATA))(`wheel and GNSS on recorded drives${orSkipped}`, () => {
  const cases = DRIVES.flatMap((drive) => [10, 1].map((hz) => [drive, hz] as const));

  it.each(cases)(
    '%s, %i Hz: a wheel lost for 60 s at 100 km/h costs less than a metre, coming and going, and hands back without a jump',
    (drive, hz) => {
      const { wheel, gnss } = highway(drive, hz);
      const untouched = shown([...wheel, ...gnss], 270, 400).by;
      const there = wheel.filter((o) => seconds(o.at) < 280 || seconds(o.at) > 340);
      // a box that was off counts from nothing; one that was only unheard goes on
      const begin = there.find((o) => seconds(o.at) > 340) as Pulse;
      const off = there.map((o) => (o.at < begin.at ? o : { ...o, count: (o.count - begin.count) >>> 0, boxUs: o.at - begin.at }));
      for (const cut of [there, off]) {
        const { by, odometer } = shown([...cut, ...gnss], 270, 400);
        const list = differences(by, untouched);
        expect(odometer).toMatchObject({ bridges: 1, mode: 'wheel' });
        expect(list.length).toBeGreaterThan(5_000);
        expect(worst(list)).toBeLessThan(1);
        expect(worst(list.filter(({ t }) => t > 345))).toBeLessThan(0.5);
        const jumps = list.slice(1).map(({ off: now }, i) => ({ off: now - (list[i] as { off: number }).off }));
        expect(worst(jumps)).toBeLessThan(0.5);
      }
    },
  );

  it.each(cases)('%s, %i Hz: 3 % slip for 5 s is caught, and less than a metre of it stays', (drive, hz) => {
    const { wheel, gnss } = highway(drive, hz);
    const untouched = shown([...wheel, ...gnss], 290, 360).by;
    for (const share of [0.03, -0.03]) {
      let [extra, before] = [0, (wheel[0] as Pulse).count];
      const slipped = wheel.map((o) => {
        if (seconds(o.at) >= 300 && seconds(o.at) < 305) extra += ((o.count - before) | 0) * share;
        before = o.count;
        return { ...o, count: (o.count + Math.round(extra)) >>> 0 };
      });
      expect(Math.abs(extra * PER_COUNT)).toBeGreaterThan(3);
      const { by, odometer } = shown([...slipped, ...gnss], 290, 360);
      const list = differences(by, untouched);
      expect(worst(list)).toBeLessThan(3.2);
      expect(worst(list.filter(({ t }) => t > 312))).toBeLessThan(1);
      const caught = odometer.comparison.slip.done.find((slip) => seconds(slip.to) > 300 && seconds(slip.from) < 305);
      expect(Math.sign(caught?.metres ?? 0)).toBe(-Math.sign(share));
    }
  });

  it.each(DRIVES)('%s: sentences are held to be between 0.05 and 0.2 s late from the second minute on', (drive) => {
    const { wheel, gnss } = highway(drive, 10);
    const held: number[] = [];
    const o = feed(journal(wheel, gnss), {
      metresPerPulse: PER_COUNT,
      each: (x, now) => seconds(now) > 60 && held.push(x.gnss.lag.us / 1e6),
    });
    expect(Math.min(...minMax(held))).toBeGreaterThan(0.05);
    expect(Math.max(...minMax(held))).toBeLessThan(0.2);
    // nobody slipped on a dry motorway: one turn at walking pace before it, one after it
    const fast = o.comparison.slip.done.filter((slip) => seconds(slip.from) > 80 && seconds(slip.to) < 520);
    expect(fast).toEqual([]);
  });

  it('a phone beside a car’s own speed in whole km/h: 0.78 s late', () => {
    const list: NewObservation[] = [];
    let [metres, t0, v0] = [0, 0, 0];
    for (const line of lines('obd_phone/trip_with_obd.txt')) {
      const [ms, kind, value] = line.split(';') as [string, string, string];
      const t = (Number(ms) - 1_558_467_126_220) / 1000;
      if (kind === 'gps') {
        const [, , speed, utcMs] = value.split(':').map(Number);
        list.push(fix(t, speed as number, utcMs as number, 'geolocation'));
        continue;
      }
      const v = Number(value) / 3.6;
      metres += ((v + v0) / 2) * (t - t0);
      [t0, v0] = [t, v];
      list.push(pulse(t, Math.floor(metres / 0.25)));
    }
    const o = feed(journal(list));
    expect(Math.abs(o.gnss.lag.us / 1e6 - 0.78)).toBeLessThan(0.06);
  });

  it('four wheels and a receiver on one clock: the same lateness by each wheel to 0.05 s, and the known shortfall of each', () => {
    const rows = lines('four_wheels/wheel_speed.csv')
      .slice(1)
      .map((line) => line.split(',').map(Number));
    const zero = (rows[0] as number[])[0] as number;
    const gnss = lines('four_wheels/gnss_ublox.csv')
      .slice(1)
      .map((line) => line.split(',').map(Number))
      .map(([t, , , speed, utc]) => fix((t as number) - zero, speed as number, utc as number, 'nmea'));
    for (const column of [1, 2, 3, 4]) {
      let [metres, t0, v0] = [0, 0, (rows[0] as number[])[column] as number];
      const wheel = rows.map((row) => {
        const [t, v] = [(row[0] as number) - zero, row[column] as number];
        metres += ((v + v0) / 2) * (t - t0);
        [t0, v0] = [t, v];
        return pulse(t, Math.floor(metres / 0.02));
      });
      const o = feed(journal(wheel, gnss), { metresPerPulse: 0.02 });
      expect(o.gnss.lag.us / 1e6).toBeGreaterThan(0.13);
      expect(o.gnss.lag.us / 1e6).toBeLessThan(0.2);
      // wheels say 1000.9 m, the receiver 1009.1
      expect(o.comparison.filter.ratio).toBeGreaterThan(1.003);
      expect(o.comparison.filter.ratio).toBeLessThan(1.013);
      expect(o.comparison.slip.done).toEqual([]);
    }
  });
});

const minMax = (list: readonly number[]): [number, number] =>
  list.reduce(([low, high], x) => [Math.min(low, x), Math.max(high, x)], [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY] as [
    number,
    number,
  ]);
