import fc from 'fast-check';
import { Geodesic } from 'geographiclib-geodesic';
import { describe, expect, it } from 'vitest';
import type { SurveyedPoint } from '#shared/course/course-book.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { type CourseLine, courseLineOf } from '#shared/pace/course-line.ts';
import type { Odometer } from '#shared/pace/odometer.ts';
import { NODE_US, type SourceNode } from '#shared/pace/source-node.ts';
import { journal, pulses } from '#tests/unit/pace/drives.ts';
import { us } from '#tests/unit/pace/folds.ts';
import { ALL, feed, noisyFixes, zoned } from '#tests/unit/pace/gnss-drives.ts';

const LATE = 0.165;
const UNTIL = 200;
const wheel = pulses(zoned, { until: UNTIL, hz: 100 });
const receiver = (seed: number, more: Partial<Parameters<typeof noisyFixes>[1]> = {}): NewObservation[] =>
  noisyFixes(zoned, { until: UNTIL, latency: 0.15, seed, ...more });
const seconds = (at: number): number => (at - us(0)) / 1e6;
const truth = (at: number): number => zoned.metresAt(seconds(at));
const steps = (nodes: readonly SourceNode[]): [SourceNode, SourceNode][] => nodes.slice(1).map((node, i) => [nodes[i] as SourceNode, node]);

/** A road to the east along which official and true metres are the same. */
const road: SurveyedPoint[] = Array.from({ length: 100 }, (_, i) => {
  const p = Geodesic.WGS84.Direct(45, 7, 90, i * 100 - 200);
  return { lat: p.lat2 as number, lon: p.lon2 as number, d: i * 100 - 200 };
});
const onRoad = (metres: number): { lat: number; lon: number; course: number } => {
  const p = Geodesic.WGS84.Direct(45, 7, 90, metres);
  return { lat: p.lat2 as number, lon: p.lon2 as number, course: 90 };
};

describe('nodes where wheel and GNSS are compared', () => {
  it('come every 30 s from the moving off on, in order, and hold what both say of the same instant', () => {
    const o = feed(journal(wheel, receiver(1)));
    const nodes = o.sourceNodes;
    expect(seconds((nodes[0] as SourceNode).at)).toBeCloseTo(0.6, 0);
    // from half a second after the release to 200 s
    expect(nodes.length).toBe(7);
    for (const [a, b] of steps(nodes)) expect(b.at - a.at).toBe(NODE_US);
    for (const node of nodes) {
      expect(Math.abs(node.w * 0.25 - truth(node.at))).toBeLessThan(0.5);
      expect(node).toMatchObject({ g: 0, position: null });
    }
  });

  it('compare to within the variance they state: 2 sigma in 19 of 20 stretches', () => {
    let [within, all, squares] = [0, 0, 0];
    for (let seed = 1; seed <= 18; seed++) {
      // the launch teaches the lateness; from then on it is known
      for (const [a, b] of steps(feed(journal(wheel, receiver(seed, { hz: seed % 2 === 0 ? 5 : 1 }))).sourceNodes)) {
        if (b.compared === null) continue;
        const off = b.gnssMetres - a.gnssMetres - (truth(b.at) - truth(a.at));
        all++;
        squares += (off * off) / b.compared;
        if (off * off <= 4 * b.compared) within++;
      }
    }
    expect(all).toBeGreaterThan(90);
    expect(within / all).toBeGreaterThan(0.93);
    // neither is the variance overstated beyond measure
    expect(squares / all).toBeGreaterThan(0.15);
  });

  it('do not compare over an outage, a slip, a bridge or a restart of the box', () => {
    const cut = (from: number, to: number) => (list: NewObservation[]) => list.filter((x) => x.at < us(from) || x.at > us(to));
    const gapless = (o: Odometer): number[] => o.sourceNodes.filter((n) => n.compared === null).map((n) => Math.round(seconds(n.at)));
    expect(gapless(feed(journal(wheel, receiver(2)))).filter((t) => t > 1)).toEqual([]);
    expect(gapless(feed(journal(wheel, cut(105, 110)(receiver(2))))).filter((t) => t > 1)).toHaveLength(1);
    expect(gapless(feed(journal(cut(105, 125)(wheel), receiver(2)))).filter((t) => t > 1).length).toBeGreaterThanOrEqual(2);
    const restarted = wheel.map((x) =>
      x.type === 'pulse.v1' && x.at > us(150) ? { ...x, count: x.count - 20_000, boxUs: x.at - us(149) } : x,
    );
    expect(gapless(feed(journal(restarted, receiver(2)))).filter((t) => t > 1)).toHaveLength(1);
  });

  it('are the same, to centimetres, whichever of the two comes first, up to 0.8 s', () => {
    const base = feed(journal(wheel, receiver(3))).sourceNodes;
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1e6 }), (seed) => {
        const random = createRandom(seed, 'delays');
        const delayed = (list: readonly NewObservation[]): { o: NewObservation; due: number }[] => {
          let [due, delay] = [0, 0];
          return list.map((o, i) => {
            if (i % 7 === 0) delay = random.range(0, 800_000);
            due = Math.max(due, o.at + delay);
            return { o, due };
          });
        };
        const order = [...delayed(wheel), ...delayed(receiver(3))].sort((a, b) => a.due - b.due).map((x) => x.o);
        const nodes = feed(order).sourceNodes;
        nodes.slice(0, base.length - 1).forEach((node, i) => {
          const same = base[i] as SourceNode;
          // which pulse a car that just moves off had reached is known later or sooner: centimetres, and a millisecond of lateness
          expect(Math.abs(node.at - same.at)).toBeLessThan(2_000);
          expect(Math.abs(node.w * 0.25 - same.w * 0.25 - (truth(node.at) - truth(same.at)))).toBeLessThan(0.02);
          expect(Math.abs(node.gnssMetres - same.gnssMetres - (truth(node.at) - truth(same.at)))).toBeLessThan(0.05);
          expect(node.compared === null).toBe(same.compared === null);
        });
        expect(nodes.length).toBeGreaterThanOrEqual(base.length - 1);
      }),
      { numRuns: 6 },
    );
  });

  it('carry the nose’s place on the surveyed line, with what its lateness and the aerial add', () => {
    let expected = 0;
    const surveyed = {
      line: courseLineOf(road) as CourseLine,
      aerialM: 2,
      get expected() {
        return expected;
      },
    };
    const follow = {
      surveyed,
      each: (x: Odometer): void => {
        expected = x.w * 0.25;
      },
    };
    let [squares, all] = [0, 0];
    for (let seed = 4; seed < 12; seed++) {
      expected = 0;
      const placed = receiver(seed, { place: (m) => onRoad(m - 2), off: 1.5 });
      const nodes = feed(journal(wheel, placed), follow).sourceNodes.filter((n) => n.position !== null);
      expect(nodes.length).toBe(7);
      for (const node of nodes) {
        const { d, sigma } = node.position as { d: number; sigma: number };
        squares += (d - truth(node.at)) ** 2 / sigma ** 2;
        all++;
      }
    }
    expect(squares / all).toBeLessThan(2);
    expect(squares / all).toBeGreaterThan(0.1);
    const unasked = feed(journal(wheel, receiver(4, { place: (m) => onRoad(m - 2), off: 1.5 })), {
      surveyed,
      aids: { ...ALL, gnssPosition: false },
    });
    expect(unasked.sourceNodes.every((n) => n.position === null)).toBe(true);
  });

  it('come on GNSS alone too, compared with nothing', () => {
    const o = feed(journal(wheel, receiver(5)), { aids: { ...ALL, wheel: false } });
    expect(o.sourceNodes.length).toBe(7);
    for (const node of o.sourceNodes) {
      expect(node).toMatchObject({ w: 0, compared: null });
      expect(Math.abs(node.g - truth(node.at))).toBeLessThan(3);
    }
  });

  it('stay finite whatever the fixes say', () => {
    // a state is kept as JSON, which knows no negative zero
    const number = fc.oneof(
      fc.constant(null),
      fc.double().map((x) => x + 0),
    );
    const wild = fc.record({
      at: fc.integer({ min: us(0), max: us(60) }),
      speed: number,
      lat: number,
      lon: number,
      accuracy: number,
      utcMs: number,
      via: fc.constantFrom('nmea' as const, 'geolocation' as const),
    });
    fc.assert(
      fc.property(fc.array(wild, { maxLength: 40 }), (fixes) => {
        const list = fixes.map((f): NewObservation => ({ type: 'fix.v1', course: null, ...f }));
        const surveyed = { line: courseLineOf(road) as CourseLine, aerialM: 2, expected: 0 };
        const o = feed(
          journal(
            wheel.filter((x) => x.at < us(60)),
            list,
          ),
          { surveyed },
        );
        expect(JSON.parse(JSON.stringify(o))).toEqual(o);
      }),
      { numRuns: 40 },
    );
  });
});

describe('how late GNSS is', () => {
  const cases = [
    { via: 'nmea', latency: 0, hz: 10, utc: true },
    { via: 'nmea', latency: 0.15, hz: 5, utc: false },
    { via: 'nmea', latency: 0.4, hz: 1, utc: true },
    { via: 'geolocation', latency: 0.5, hz: 1, utc: true },
    { via: 'geolocation', latency: 1.7, hz: 1, utc: true },
  ] as const;
  it.each(cases)('$via, $latency s late at $hz Hz: known to 40 ms after the launch, to 25 ms after a zone', ({ via, latency, hz, utc }) => {
    for (const metresPerPulse of [0.05, 2]) {
      const held: number[] = [];
      const list = journal(pulses(zoned, { until: 120, hz: 100, metresPerPulse }), receiver(6, { via, latency, hz, utc, until: 120 }));
      const o = feed(list, { metresPerPulse, each: (x, at) => at > us(40) && held.length === 0 && held.push(x.gnss.lag.us) });
      const late = latency + LATE - 0.15;
      expect(Math.abs((held[0] as number) / 1e6 - late)).toBeLessThan(0.04);
      expect(Math.abs(o.gnss.lag.us / 1e6 - late)).toBeLessThan(0.025);
      expect(Math.abs(o.gnss.lag.us / 1e6 - late)).toBeLessThan((3 * o.gnss.lag.sigmaUs) / 1e6);
      expect(o.comparison.slip.done).toEqual([]);
    }
  });
});

describe('a wheel that slips or misses pulses', () => {
  /** Counts `share` too many, of what is driven, between two instants. */
  const slipping = (share: number, from: number, to: number): NewObservation[] => {
    const extra = (t: number): number => share * (zoned.metresAt(Math.min(Math.max(t, from), to)) - zoned.metresAt(from));
    return pulses({ metresAt: (t) => zoned.metresAt(t) + extra(t) }, { until: UNTIL, hz: 100 });
  };
  const offAt = (o: Odometer): number => o.w * 0.25 + o.g - truth(o.wheelKnot.at);

  it.each([0.04, -0.04, 0.2, -0.2, 0.5])('share %f for 5 s at 45 m/s: distance follows GNSS to 1.5 m, the crew is told', (share) => {
    const told: boolean[] = [];
    const o = feed(journal(slipping(share, 120, 125), receiver(7)), { each: (x) => told.push(x.comparison.slip.active !== null) });
    const injected = share * 45 * 5;
    expect(Math.abs(offAt(o))).toBeLessThan(1.5);
    expect(told.some(Boolean)).toBe(true);
    expect(o.comparison.slip.active).toBeNull();
    const moved = o.comparison.slip.done.reduce((sum, slip) => sum + slip.metres, 0);
    expect(Math.sign(moved)).toBe(-Math.sign(injected));
    expect(o.losses.some((loss) => loss.by === 'slip' && loss.sigma > 0 && loss.sigma < 2)).toBe(true);
    expect(Math.abs(o.comparison.filter.ratio - 1)).toBeLessThan(0.004);
  });

  it('that spins 15 m on moving off is put right within the launch', () => {
    const spun = { metresAt: (t: number) => zoned.metresAt(t) + 15 * Math.min(1, Math.max(0, (t - 0.5) / 3)) };
    const o = feed(journal(pulses(spun, { until: 60, hz: 100 }), receiver(8, { until: 60 })), { driven: true });
    expect(Math.abs(offAt(o))).toBeLessThan(2.5);
  });

  it('is not suspected over 30 clean drives, whatever a pulse is worth', () => {
    for (let seed = 1; seed <= 30; seed++) {
      const metresPerPulse = [0.05, 0.5, 2][seed % 3] as number;
      const o = feed(
        journal(pulses(zoned, { until: 120, metresPerPulse, hz: 50 }), receiver(seed, { until: 120, hz: [1, 5, 10][seed % 3] as number })),
        { metresPerPulse: metresPerPulse * 1.01 },
      );
      expect(o.comparison.slip.done).toEqual([]);
      expect(o.g).toBe(0);
    }
  });
});
