import { existsSync, readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { ClockV1 } from '#shared/journal/observation.ts';
import { micros } from '#shared/units.ts';
import { type BoxSample, boxShift } from '#src/run/box-bridge.ts';
import { createSessionClock, measureClockOffset } from '#src/run/clock.ts';
import { exchangeResult, leastDelay } from '#src/run/official-clock.ts';
import { must } from '#tests/client/storage/device.ts';
import { Car } from './car.ts';
import { Rig } from './rig.ts';

const VECTORS = resolve('../shared/data/vectors/ntp_offset.json');

describe('the arithmetic of an exchange', () => {
  it('is the on-wire formula of RFC 5905', () => {
    expect(exchangeResult({ t1: 0, t2: 130, t3: 131, t4: 41 })).toEqual({ offset: 110, delay: 40 });
  });

  it.skipIf(!existsSync(VECTORS))(`agrees with published worked offsets (skipped where ${VECTORS} is absent)`, () => {
    const { cases } = JSON.parse(readFileSync(VECTORS, 'utf8')) as {
      cases: readonly { t1: number; t2: number; t3: number; t4: number; offset: number; delay: number }[];
    };
    expect(cases.length).toBeGreaterThan(0);
    for (const { offset, delay, ...stamps } of cases) expect(exchangeResult(stamps)).toEqual({ offset, delay });
  });

  it('is wrong by at most half the delay, whatever the two ways took', () => {
    const ms = fc.double({ min: 0, max: 500, noNaN: true });
    fc.assert(
      fc.property(fc.double({ min: -1e6, max: 1e6, noNaN: true }), ms, ms, ms, (offset, there, thinking, back) => {
        const t2 = there + offset;
        const result = exchangeResult({ t1: 0, t2, t3: t2 + thinking, t4: there + thinking + back });
        expect(Math.abs(result.offset - offset)).toBeLessThanOrEqual((there + back) / 2 + 1e-6);
        expect(result.delay).toBeCloseTo(there + back, 6);
      }),
    );
  });

  it('takes the sample of least delay, not a mean', () => {
    expect(leastDelay([])).toBeNull();
    const slow = { offset: 90, delay: 200 };
    const quick = { offset: 12, delay: 20 };
    // Of three no more is known than the bound, evenly spread over ±10 ms: 20 / sqrt(12) = 5.7735.
    const few = leastDelay([slow, quick, { offset: 40, delay: 60 }]);
    expect(few).toMatchObject(quick);
    expect(few?.sigma).toBeCloseTo(5.7735, 4);
    expect(leastDelay([{ offset: 0, delay: 0 }])?.sigma).toBe(0.5);
    // Sixteen show how far the queues reach: nine hundredths of the round trip, and a quarter of the mean queue of 4 ms over sqrt(16).
    const many = Array.from({ length: 16 }, (_, i) => ({ offset: 0, delay: i === 0 ? 20 : 20 + (4 * 16) / 15 }));
    expect(leastDelay(many)?.sigma).toBeCloseTo(Math.hypot(1.8, 0.25), 9);
  });
});

describe('the session clock', () => {
  const device = { now: 100, wall: 1_700_000_000_000 };
  const clocks = { mono: () => device.now, wall: () => device.wall };

  it('counts whole microseconds from where it was set, at its rate', () => {
    device.now = 100;
    const clock = createSessionClock({ rate: 1, from: micros(0), clocks });
    expect([clock.now(), clock.at(101.0004), clock.at(99)]).toEqual([0, 1000, -1000]);
    device.now = 350.25;
    expect(clock.now()).toBe(250_250);
    clock.shift(-1_000_000);
    expect([clock.now(), clock.at(350.25)]).toEqual([-749_750, -749_750]);
    const fast = createSessionClock({ rate: 40, from: micros(5_000_000), clocks });
    device.now += 1000;
    expect(fast.now()).toBe(45_000_000);
  });

  it('reads both device clocks as they would read at its rate', () => {
    device.now = 0;
    const clock = createSessionClock({ rate: 10, from: micros(0), clocks });
    const first = clock.reading();
    device.now += 100;
    device.wall += 100;
    const later = clock.reading();
    expect(later.at - first.at).toBe(1_000_000);
    expect(later.wall - first.wall).toBeCloseTo(1000, 6);
    expect(later.mono - first.mono).toBeCloseTo(1000, 6);
  });

  it('cannot stand still or run back', () => {
    for (const rate of [0, -1, Number.NaN]) expect(() => createSessionClock({ rate, from: micros(0), clocks })).toThrow(RangeError);
  });
});

describe('bridging two clocks by asking', () => {
  it('counts the exchange with the least round trip, within half of it', async () => {
    let mine = 1000;
    const trips = [80, 3, 41, 12];
    let i = 0;
    const ask = async (): Promise<number> => {
      const trip = trips[i++ % trips.length] as number;
      mine += trip * 0.9;
      const theirs = mine - 250;
      mine += trip * 0.1;
      return theirs;
    };
    const { offset, uncertainty } = await measureClockOffset(ask, () => mine);
    expect(uncertainty).toBeCloseTo(1.5, 9);
    expect(Math.abs(offset - 250)).toBeLessThanOrEqual(1.5);
  });
});

describe('the official clock', () => {
  const serverAhead = 1_234.5;
  const withServer = (rig: Rig, calls: { n: number }) => ({
    exchangeTime: async () => {
      calls.n++;
      const t2 = rig.world.wall() + serverAhead;
      return { t2, t3: t2 };
    },
  });
  const samplesOf = async (session: { exportJournal(): Promise<string> }): Promise<readonly ClockV1[]> =>
    must(fromNdjson(await session.exportJournal())).observations.filter((o): o is ClockV1 => o.type === 'clock.v1');

  it('is compared at the start and every five minutes on the grid', async () => {
    const rig = new Rig(3_600_000);
    const calls = { n: 0 };
    const { session } = await rig.open('new', withServer(rig, calls));
    await rig.world.pass(1000);
    const [sample] = await samplesOf(session);
    expect(calls.n).toBe(16);
    expect(sample).toMatchObject({ source: 'exchange', uncertaintyMs: 0.5 });
    expect((session.readout().official?.now ?? 0) - rig.world.wall()).toBeCloseTo(serverAhead, 3);
    await rig.world.pass(330_000);
    expect(await samplesOf(session)).toHaveLength(2);
    expect(must(await session.checkClock()).uncertaintyMs).toBe(0.5);
    expect(await samplesOf(session)).toHaveLength(3);
  });

  it('is compared again as soon as the device may have slept', async () => {
    const rig = new Rig(3_600_000);
    const { session } = await rig.open('new', withServer(rig, { n: 0 }));
    await rig.world.pass(31_000);
    rig.world.sleep(7000);
    await rig.world.pass(11_000);
    expect(session.readout().official?.sigma).toBeGreaterThan(6.9);
    expect(session.readout().warnings).toContainEqual({ code: 'slept' });
    await rig.world.pass(30_000);
    expect(await samplesOf(session)).toHaveLength(2);
    expect((session.readout().official?.now ?? 0) - rig.world.wall()).toBeCloseTo(serverAhead, 0);
    expect(session.readout().official?.sigma).toBeLessThan(0.01);
  });

  it('runs along with a faster session clock, so that every sample means the same', async () => {
    const rig = new Rig(3_600_000);
    const { session } = await rig.open('new', { ...withServer(rig, { n: 0 }), clockRate: 30, practice: true });
    await rig.world.pass(20_000);
    must(await session.checkClock());
    const offsets = (await samplesOf(session)).map(({ officialMs, at }) => officialMs - at / 1000);
    expect(offsets.length).toBeGreaterThanOrEqual(2);
    for (const offset of offsets) expect(offset).toBeCloseTo(offsets[0] as number, 2);
  });

  it('is not asked for from the countdown to the finish, unless the class permits a data link', async () => {
    for (const dataLink of [false, true]) {
      const rig = new Rig(30_000, (pack) => ({ ...pack, raceClass: { ...pack.raceClass, aids: { ...pack.raceClass.aids, dataLink } } }));
      const calls = { n: 0 };
      const opened = await rig.open('new', withServer(rig, calls));
      const car = new Car(rig.world, rig.pack, 7, 30_000);
      must(
        await opened.session.attach(
          car.source(opened.window, () => opened.session, opened.originMs),
          { ask: true },
        ),
      );
      await rig.world.pass(5000);
      expect(opened.session.readout().phase).toBe('countdown');
      const before = calls.n;
      const asked = await opened.session.checkClock();
      if (dataLink) must(asked);
      else expect(asked).toMatchObject({ ok: false, error: { code: 'car-moving' } });
      expect(calls.n - before).toBe(dataLink ? 16 : 0);
      await opened.session.close();
    }
  });

  it('says so when the server does not answer', async () => {
    const rig = new Rig(3_600_000);
    for (const exchangeTime of [async () => null, () => Promise.reject(new Error('offline'))]) {
      const { session } = await rig.open('new', { exchangeTime });
      expect(await session.checkClock()).toMatchObject({ ok: false, error: { code: 'no-connection' } });
      expect(await samplesOf(session)).toEqual([]);
    }
  });
});

describe('the box over a gap', () => {
  const line = (fromUs: number, boxFrom: number, count: number, n = 20): BoxSample[] =>
    Array.from({ length: n }, (_, i) => ({
      at: fromUs + i * 10_000 + ((i * 7) % 5) * 800,
      boxUs: (boxFrom + i * 10_000) % 2 ** 32,
      channel: 1,
      count: count + i,
    }));

  it('tells the shift to within the way of a line, over a wrap of its clock and a long gap', () => {
    for (const boxFrom of [0, 2 ** 32 - 100_000, 2 ** 31]) {
      for (const gap of [1_000_000, 600_000_000, 5_400_000_000]) {
        const found = boxShift(line(50_000_000, boxFrom, 5000), line(50_000_000 + gap + 3_000_000, boxFrom + gap, 5000 + gap / 1e4));
        expect(found?.shiftUs).toBeCloseTo(-3_000_000, -1);
      }
    }
  });

  it('is not believed where it may have been restarted, or where nothing is known of it', () => {
    const before = line(50_000_000, 900_000_000, 5000);
    expect(boxShift([], before)).toBeNull();
    expect(boxShift(before, [])).toBeNull();
    expect(boxShift(before, line(60_000_000, 100_000, 12))).toBeNull();
    // Counts went on, but by more than a wheel can turn.
    expect(boxShift(before, line(160_000_000, 950_000_000, 4e9))).toBeNull();
    // Another channel proves nothing.
    expect(
      boxShift(
        before,
        line(160_000_000, 950_000_000, 6000).map((s) => ({ ...s, channel: 2 })),
      ),
    ).toBeNull();
    expect(boxShift(before, line(160_000_000, 950_000_000, 6000))?.shiftUs).toBeCloseTo(-60_000_000, -1);
  });
});
