import { existsSync, readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createRandom } from '#shared/drive/random.ts';
import { type Clock, clockExchange, clockSigmaMs, holdoverVariance, makeClock } from '#shared/pace/clock.ts';
import { offerClock, takePps } from '#shared/pace/clock-hear.ts';
import { hearBox, takeClockPair, takeEpoch } from '#shared/pace/clock-life.ts';
import { ownRhythm, tapSetOf } from '#shared/pace/clock-taps.ts';

const VECTORS = resolve('../shared/data/vectors/ntp_offset.json');
const SOURCES = ['exchange', 'nmea', 'pps', 'tap'] as const;
const EPOCH = 1_800_000_000_000;

function offer(clock: Clock, t: number, source: (typeof SOURCES)[number], offMs: number, uncertaintyMs: number): void {
  const at = Math.round(t * 1e6);
  offerClock(clock, { type: 'clock.v1', seq: 0, at, source, officialMs: EPOCH + t * 1000 + offMs, uncertaintyMs }, at, false);
}

describe('an exchange', () => {
  it('is the on-wire formula of RFC 5905: (0, 130, 131, 41) is an offset of 110 and a delay of 40', () => {
    expect(clockExchange(0, 130, 131, 41)).toEqual({ offset: 110, delay: 40 });
  });

  it.skipIf(!existsSync(VECTORS))(`agrees with the published cases (skipped where ${VECTORS} is absent)`, () => {
    const { cases } = JSON.parse(readFileSync(VECTORS, 'utf8')) as { cases: readonly Record<'t1' | 't2' | 't3' | 't4', number>[] };
    expect(cases.length).toBeGreaterThan(0);
    for (const { t1, t2, t3, t4, ...expected } of cases) expect(clockExchange(t1, t2, t3, t4)).toEqual(expected);
  });

  it('is off by at most half its delay, however unlike the two ways', () => {
    const ms = fc.double({ min: 0, max: 2000, noNaN: true });
    fc.assert(
      fc.property(fc.double({ min: -1e7, max: 1e7, noNaN: true }), ms, ms, ms, (theta, there, thinking, back) => {
        const { offset, delay } = clockExchange(0, there + theta, there + theta + thinking, there + thinking + back);
        expect(Math.abs(offset - theta)).toBeLessThanOrEqual(delay / 2 + 1e-6);
      }),
    );
  });
});

const samples = fc.array(
  fc.record({
    source: fc.constantFrom(...SOURCES),
    after: fc.double({ min: 0.1, max: 900, noNaN: true }),
    off: fc.double({ min: -150, max: 150, noNaN: true }),
    sigma: fc.double({ min: 0.2, max: 200, noNaN: true }),
  }),
  { minLength: 1, maxLength: 30 },
);

describe('the filter', () => {
  const fed = (list: readonly { source: (typeof SOURCES)[number]; after: number; off: number; sigma: number }[]): Clock => {
    const clock = makeClock();
    let t = 0;
    for (const { source, after, off, sigma } of list) {
      t += after;
      offer(clock, t, source, off, sigma);
    }
    return clock;
  };

  it('says less for certain the longer nothing is heard, whatever was heard before', () => {
    fc.assert(
      fc.property(samples, fc.array(fc.double({ min: 0, max: 5000, noNaN: true }), { minLength: 2, maxLength: 20 }), (list, steps) => {
        const clock = fed(list);
        const { chosen } = clock;
        if (chosen === null) throw new Error('nothing chosen');
        let [at, before] = [chosen.at, clockSigmaMs(clock, chosen.at)];
        for (const step of steps) {
          at += Math.round(step * 1e6);
          const now = clockSigmaMs(clock, at);
          expect(now).toBeGreaterThanOrEqual(before);
          before = now;
        }
      }),
    );
  });

  it('keeps a covariance that is symmetric, with no variance below zero, and is plain data', () => {
    fc.assert(
      fc.property(samples, (list) => {
        const { filter } = fed(list);
        const p = filter?.p ?? [];
        const n = Math.sqrt(p.length);
        for (let i = 0; i < n; i++) {
          expect(p[i * n + i]).toBeGreaterThanOrEqual(-1e-6);
          for (let j = 0; j < n; j++) {
            expect(p[i * n + j]).toBeCloseTo(p[j * n + i] as number, 5);
            expect(Number.isFinite(p[i * n + j])).toBe(true);
          }
        }
        expect(JSON.parse(JSON.stringify(filter))).toEqual(filter);
      }),
    );
  });

  it('does not grow surer than the path itself, however often it is asked', () => {
    const clock = makeClock();
    for (let i = 0; i < 200; i++) offer(clock, i * 300, 'exchange', 0, 5);
    // 80 % of the variance is the path's own: 4.5 ms
    expect(clockSigmaMs(clock, 199 * 300e6)).toBeGreaterThan(4.4);
    expect(clockSigmaMs(clock, 199 * 300e6)).toBeLessThan(5);
  });

  it('is as the formula has it: σ² = σ_θ² + 2τP_θρ + τ²(σ_ρ² + (1 ppm)²) + qτ³/3', () => {
    const choice = { at: 0, offsetMs: 0, rate: 0, sigmaMs: 3, cross: 0.001, rateVariance: 4e-6, source: 'exchange' } as const;
    const q = 0.00015 ** 2 / 60;
    expect(holdoverVariance(choice, 1800)).toBeCloseTo(9 + 3.6 + 1800 ** 2 * 5e-6 + (q * 1800 ** 3) / 3, 9);
  });

  it('tells the event’s own clock where an exchange contradicts only the time of a receiver whose latency nobody knows', () => {
    const clock = makeClock();
    // a receiver that is 900 ms late says so with 80 ms
    for (let i = 0; i < 5; i++) offer(clock, i * 60, 'nmea', -750, 80.1);
    offer(clock, 301, 'exchange', 0, 3);
    expect(Math.abs((clock.chosen?.offsetMs ?? 0) - EPOCH)).toBeLessThan(10);
    for (let i = 6; i < 12; i++) offer(clock, i * 60, 'nmea', -750, 80.1);
    expect(Math.abs((clock.chosen?.offsetMs ?? 0) - EPOCH)).toBeLessThan(10);
  });
});

describe('whatever a journal holds', () => {
  const wild = fc.oneof(fc.double({ min: -9e15, max: 9e15, noNaN: true }), fc.double({ min: -2e9, max: 2e9, noNaN: true }));
  const instant = fc.oneof(wild.map(Math.round), fc.integer({ min: 0, max: 4_000_000_000 }));
  const acts = fc.array(
    fc.record({
      kind: fc.constantFrom('clock', 'clock', 'pps', 'epoch', 'pair', 'box'),
      at: instant,
      source: fc.constantFrom(...SOURCES, 'wall'),
      a: wild,
      b: wild,
      started: fc.boolean(),
      bridgedBy: fc.constantFrom('first', 'box', 'wall', 'page'),
    }),
    { maxLength: 60 },
  );

  it('leaves a clock of finite numbers that can be stored', () => {
    fc.assert(
      fc.property(acts, (list) => {
        const clock = makeClock();
        for (const [seq, { kind, at, source, a, b, started, bridgedBy }] of list.entries()) {
          if (kind === 'clock') offerClock(clock, { type: 'clock.v1', seq, at, source, officialMs: a, uncertaintyMs: b }, at, started);
          if (kind === 'pps') takePps(clock, at, at, started);
          if (kind === 'epoch')
            takeEpoch(clock, { type: 'epoch.v1', seq, at, n: seq, mono: a, wall: b, bridgedBy, uncertaintyMs: a }, started);
          if (kind === 'pair') takeClockPair(clock, { type: 'clock-pair.v1', seq, at, mono: a, wall: b });
          if (kind === 'box') hearBox(clock, at, Math.abs(Math.round(a)) % 2 ** 32);
        }
        const stored = JSON.stringify(clock, (_, v) => (typeof v === 'number' && !Number.isFinite(v) ? 'not a number' : v));
        expect(stored).not.toContain('not a number');
        if (clock.chosen !== null) expect(Number.isFinite(clockSigmaMs(clock, 1e9))).toBe(true);
      }),
      { numRuns: 500 },
    );
  });
});

describe('edges of the pulse per second', () => {
  it('cost a bounded state and no more at the end of a day than at the beginning', () => {
    const random = createRandom(3, 'edges');
    const clock = makeClock();
    offer(clock, 0, 'exchange', 0, 5);
    for (let k = 1; k < 86_400; k++) {
      const at = Math.round((k + random.range(0, 0.01)) * 1e6);
      takePps(clock, at, at, false);
    }
    expect(JSON.stringify(clock).length).toBeLessThan(4000);
    expect(Math.abs((clock.chosen?.offsetMs ?? 0) - EPOCH)).toBeLessThan(1.5);
  });
});

describe('touches along an official clock', () => {
  const touches = (n: number, late: (i: number) => number): number[] =>
    Array.from({ length: n }, (_, i) => Math.round((i * 1000 + late(i)) * 1000));

  it('give the second of the last touch by their median, slips left out', () => {
    const random = createRandom(5, 'touches');
    const set = tapSetOf(touches(12, (i) => 40 + (i === 4 ? 420 : random.gauss(20))));
    expect(Math.abs((set?.at ?? 0) / 1000 - 11_040)).toBeLessThan(20);
    expect(set?.sigmaMs).toBeGreaterThan(30);
    expect(set?.sigmaMs).toBeLessThan(40);
  });

  it('may leave a second out', () => {
    const list = touches(14, () => 0).filter((_, i) => i !== 5 && i !== 6);
    expect(tapSetOf(list)?.at).toBe(13_000_000);
  });

  it('are too few under ten, and none where no rhythm is kept', () => {
    expect(tapSetOf(touches(9, () => 0))).toBeNull();
    expect(tapSetOf([])).toBeNull();
    expect(tapSetOf(touches(12, (i) => (i * 370) % 1000))).toBeNull();
  });

  it('are freed of what the person anticipates by, as touches along our own flash show it', () => {
    const flash = 123_400;
    const own = ownRhythm(
      touches(15, (i) => -45 + (i % 3)).map((t) => t + flash),
      flash,
    );
    expect(own?.lateMs).toBeCloseTo(-44, 6);
    expect(
      tapSetOf(
        touches(11, () => -44),
        own ?? undefined,
      )?.at,
    ).toBe(10_000_000);
    expect(
      tapSetOf(
        touches(11, () => -44),
        own ?? undefined,
      )?.sigmaMs,
    ).toBeLessThan(13);
  });
});
