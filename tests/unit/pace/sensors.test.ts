import { describe, expect, it } from 'vitest';
import type { Aids } from '#shared/course/race-class.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, type Motion, pulses, RELEASE_US, tapAt } from '#tests/unit/pace/drives.ts';
import { act, fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack, withClass } from '#tests/unit/pace/packs.ts';

const motion = fromRest(2.5, 40, 0.4);
const clock = [clockCheck(pack)];
/** Sentences, and a tablet's own location, come this late where nothing tells how late they are. */
const RECEIVER_S = 0.15;
const TABLET_S = 0.9;
const aids = (change: Partial<Aids>) => withClass(pack, { aids: { ...pack.raceClass.aids, ...change } });
const between = (list: NewObservation[], from: number, to: number): NewObservation[] =>
  list.filter((o) => o.at > us(from) && o.at < us(to));
const outside = (list: NewObservation[], from: number, to: number): NewObservation[] =>
  list.filter((o) => !(o.at > us(from) && o.at < us(to)));

/** Positions along a meridian: a degree of latitude step found by GeographicLib's own series is not needed, 1 m is 1/111 132 degree near 45°. */
function positions(m: Motion, until: number, hz = 5): NewObservation[] {
  const list: NewObservation[] = [];
  for (let t = -5; t <= until; t += 1 / hz) {
    const lat = 45 + m.metresAt(t) / 111_131.745;
    list.push({ type: 'fix.v1', at: us(t + RECEIVER_S), via: 'nmea', lat, lon: 7, speed: null, course: null, accuracy: 3, utcMs: null });
  }
  return list;
}

describe('the wheel', () => {
  it('a count that wraps at 2^32 and a box clock that wraps cost nothing', () => {
    const wrapped = pulses(motion, { until: 200, firstCount: 2 ** 32 - 8_000 });
    const plain = pulses(motion, { until: 200 });
    expect(wrapped.some((o) => o.type === 'pulse.v1' && o.count < 100)).toBe(true);
    const [a, b] = [fold(pack, journal(clock, plain)), fold(pack, journal(clock, wrapped))];
    expect(b.derived).toEqual(a.derived);
    expect(b.odometer.wheel.wild + b.odometer.wheel.restarts).toBe(0);
  });

  it('wild records invent no distance', () => {
    const wild = [20, 20.005, 55, 120].map((t) => act(t, { type: 'pulse.v1', channel: 0, count: 0, boxUs: 0 }));
    const far = act(80, { type: 'pulse.v1', channel: 0, count: 4_000_000_000, boxUs: (us(80) + 4e9) % 2 ** 32 });
    const [a, b] = [
      fold(pack, journal(clock, pulses(motion, { until: 200 }))),
      fold(pack, journal(clock, pulses(motion, { until: 200 }), wild, [far])),
    ];
    expect(b.derived.passings).toEqual(a.derived.passings);
    expect(b.odometer.wheel.wild).toBeGreaterThanOrEqual(4);
    expect(sheetOf(pack, journal(clock, pulses(motion, { until: 200 }), wild)).warnings.join()).toContain('did not follow');
  });

  it('a count that dithers by one at standstill starts nothing', () => {
    const dither = pulses(motion, { until: 60, metresPerPulse: 0.00005, from: -30 }).map((o, i) =>
      o.type === 'pulse.v1' && o.at < us(0)
        ? { ...o, count: o.count + 10 + (i % 2) }
        : o.type === 'pulse.v1'
          ? { ...o, count: o.count + 10 }
          : o,
    );
    const p = { ...pack, wheel: { ...pack.wheel, mmPerPulse: 0.05 } };
    const state = fold(p, journal(clock, dither));
    expect(((state.derived.firstMovedAt as number) - us(0)) / 1e6).toBeCloseTo(0.4, 2);
    expect(state.odometer.track.trace.at.length).toBeLessThan(800);
  });

  it('another channel and another wheel do not count', () => {
    const other = pulses(motion, { until: 100, channel: 1, metresPerPulse: 0.1 });
    const [a, b] = [
      look(pack, journal(clock, pulses(motion, { until: 100 })), [99]),
      look(pack, journal(clock, pulses(motion, { until: 100 }), other), [99]),
    ];
    expect(b[0]?.distance).toBe(a[0]?.distance);
  });

  it('lost records cost no distance, and the gap is carried on at the last speed', () => {
    const gappy = outside(pulses(motion, { until: 200 }), 100, 101.5);
    const [mid, after] = look(pack, journal(clock, gappy), [101.2, 103]);
    expect(Math.abs((mid?.distance as number) - motion.metresAt(101.2))).toBeLessThan(1);
    expect(Math.abs((after?.distance as number) - motion.metresAt(103))).toBeLessThan(0.5);
    const silent = outside(pulses(motion, { until: 200 }), 100, 300);
    const [lost] = look(pack, journal(clock, silent, [act(104, { type: 'note.v1', text: '' })]), [104]);
    expect(lost).toMatchObject({ source: 'none', speed: null });
    expect(lost?.warnings.map((w) => w.code)).toEqual(expect.arrayContaining(['wheel-lost', 'no-distance']));
  });
});

describe('another sensor behind the wheel', () => {
  const gained = (t: number, sensor: string): NewObservation => act(t, { type: 'sensor-gained.v1', sensor, detail: '' });
  const lost = (t: number, sensor: string): NewObservation => act(t, { type: 'sensor-lost.v1', sensor, detail: 'detached' });
  const shifted = (list: NewObservation[], by: number): NewObservation[] =>
    list.map((o) => (o.type === 'pulse.v1' ? { ...o, count: (o.count + by) % 2 ** 32, boxUs: (o.boxUs + 77_000) % 2 ** 32 } : o));
  const drive = pulses(motion, { until: 200 });

  it('begins a new count: a jump between two counters is no distance, however plausible', () => {
    // on the grid, 34 s apart: 3000 counts are 750 m, which a car could have driven
    const before = between(pulses(motion, { until: 200, from: -50 }), -50, -40);
    const list = journal(
      clock,
      [gained(-51, 'simulator')],
      before,
      [lost(-40, 'simulator'), gained(-6, 'serial')],
      shifted(between(drive, -6, 300), 3_000),
    );
    const [grid, under] = look(pack, list, [-2, 150]);
    expect(grid).toMatchObject({ distance: 0, phase: 'countdown' });
    expect(Math.abs((under?.distance as number) - motion.metresAt(150))).toBeLessThan(0.5);
    expect(sheetOf(pack, list).warnings).toEqual([]);
  });

  it('taken up while driving loses what went by between, and says so; with GNSS it is known', () => {
    const parts = [[gained(-11, 'simulator')], between(drive, -11, 100), [lost(100, 'simulator'), gained(105, 'serial')]];
    const after = shifted(between(drive, 105, 300), 700);
    const list = journal(clock, ...parts, after);
    const [there] = look(pack, list, [150]);
    expect(Math.abs((there?.distance as number) - (motion.metresAt(150) - 200))).toBeLessThan(5);
    expect(sheetOf(pack, list).warnings.join()).toContain('Distance was lost once');
    const [known] = look(pack, journal(clock, ...parts, after, fixes(motion, { until: 200, hz: 5 })), [150]);
    expect(Math.abs((known?.distance as number) - motion.metresAt(150))).toBeLessThan(3);
  });

  it('the same one, lost and found, goes on from its count', () => {
    const list = journal(clock, [gained(-11, 'serial')], outside(drive, 100, 105), [lost(100, 'serial'), gained(105, 'serial')]);
    const [there] = look(pack, list, [150]);
    expect(Math.abs((there?.distance as number) - motion.metresAt(150))).toBeLessThan(0.5);
  });

  it('has buttons of its own: its first count of presses is a baseline', () => {
    const press = (t: number, presses: number): NewObservation => act(t, { type: 'button.v1', button: 0, presses, boxUs: 0 });
    const list = journal(clock, drive, [gained(-11, 'simulator'), press(-5, 7), gained(50, 'serial'), press(51, 9), press(100, 10)]);
    expect(fold(pack, list).acts.taps.map((t) => t.at)).toEqual([us(100)]);
  });
});

describe('the wheel falls silent', () => {
  const gnss = fixes(motion, { until: 300, hz: 5 });

  it('GNSS carries on, says so, and the count decides when it comes back having gone on', () => {
    const list = journal(clock, outside(pulses(motion, { until: 300 }), 120, 180), gnss);
    const [before, during, after] = look(pack, list, [119, 170, 190]);
    expect(before).toMatchObject({ source: 'wheel' });
    expect(during).toMatchObject({ source: 'gnss' });
    expect(during?.warnings.map((w) => w.code)).toContain('wheel-lost');
    expect(Math.abs((during?.distance as number) - motion.metresAt(170))).toBeLessThan(1);
    expect(after?.source).toBe('wheel');
    expect(after?.warnings.map((w) => w.code)).not.toContain('wheel-lost');
    expect(Math.abs((after?.distance as number) - motion.metresAt(190))).toBeLessThan(0.5);
    const sheet = sheetOf(pack, list);
    expect(sheet.aidsUsed).toEqual(['wheel', 'gnss speed']);
    expect(sheet.warnings.join()).toContain('fell silent once');
  });

  it('a place passed in the gap is told again by the count, to within the straight line of the gap', () => {
    const list = journal(clock, outside(pulses(motion, { until: 300 }), 100, 115), gnss);
    expect(leg(sheetOf(pack, list), 'settle').elapsedS).toBeCloseTo(instantOf(motion, 4_000), 1);
  });

  it('a box that restarted keeps the bridged metres', () => {
    const back = pulses(motion, { until: 300 })
      .filter((o) => o.at >= us(180))
      .map((o) => (o.type === 'pulse.v1' ? { ...o, count: o.count - Math.floor(motion.metresAt(179) / 0.25), boxUs: o.at - us(179) } : o));
    const list = journal(clock, between(pulses(motion, { until: 300 }), -20, 120), back, gnss);
    const [after] = look(pack, list, [200]);
    expect(after?.source).toBe('wheel');
    expect(Math.abs((after?.distance as number) - motion.metresAt(200))).toBeLessThan(1.5);
    expect(sheetOf(pack, list).warnings.join()).toContain('restarted once');
  });

  it('a restart without GNSS loses the gap, says so, and is unsure by it', () => {
    const back = pulses(motion, { until: 300 })
      .filter((o) => o.at >= us(182))
      .map((o) =>
        o.type === 'pulse.v1' ? { ...o, count: o.count - Math.floor(motion.metresAt(181.5) / 0.25), boxUs: o.at - us(181.5) } : o,
      );
    const list = journal(clock, between(pulses(motion, { until: 300 }), -20, 180), back);
    const [before, after] = look(pack, list, [179, 200]);
    const off = motion.metresAt(200) - (after?.distance as number);
    // the last record lies at most a poll before 180 s; from 181.5 s the box counts again
    expect(off).toBeGreaterThan(58);
    expect(off).toBeLessThan(64);
    expect((after?.sigma as number) - (before?.sigma as number)).toBeGreaterThan(1);
    expect(sheetOf(pack, list).warnings.join()).toContain('nothing measured it');
  });

  it('a broken wire (alive, count standing) is seen too; its return keeps the bridged metres', () => {
    const stuck = Math.floor(motion.metresAt(120) / 0.25);
    const jump = Math.floor(motion.metresAt(160) / 0.25) - stuck;
    const list = journal(
      clock,
      pulses(motion, { until: 300 }).map((o) =>
        o.type !== 'pulse.v1' || o.at < us(120) ? o : { ...o, count: o.at < us(160) ? stuck : o.count - jump },
      ),
      gnss,
    );
    const [during, after] = look(pack, list, [150, 200]);
    expect(during?.source).toBe('gnss');
    expect(Math.abs((during?.distance as number) - motion.metresAt(150))).toBeLessThan(1.5);
    expect(after?.source).toBe('wheel');
    expect(Math.abs((after?.distance as number) - motion.metresAt(200))).toBeLessThan(2);
  });

  it('standing still is not silence', () => {
    const stop: Motion = { metresAt: (t) => motion.metresAt(Math.min(t, 60)) };
    const quiet = pulses(stop, { until: 200 }).filter((o) => o.at < us(60.1));
    const [r] = look(pack, journal(clock, quiet, fixes(stop, { until: 200, hz: 1 })), [150]);
    expect(r).toMatchObject({ source: 'wheel', speed: 0 });
    expect(r?.warnings.map((w) => w.code)).not.toContain('wheel-lost');
  });
});

describe('what the class permits', () => {
  const gnss = fixes(motion, { until: 200, hz: 5, latency: RECEIVER_S });
  const wheel = pulses(motion, { until: 200 });

  it('no wheel: GNSS speed measures, and the wheel is not used', () => {
    const p = aids({ wheel: false });
    const [r] = look(p, journal(clock, wheel, gnss), [150]);
    expect(r?.source).toBe('gnss');
    expect(Math.abs((r?.distance as number) - motion.metresAt(150))).toBeLessThan(1);
    expect(sheetOf(p, journal(clock, wheel, gnss)).aidsUsed).toEqual(['gnss speed']);
    expect(sheetOf(p, journal(clock, wheel, gnss)).reactionS).toBeCloseTo(0.4, 0);
  });

  it('GNSS of any kind not permitted: a silent wheel stays silent', () => {
    const p = aids({ gnssSpeed: false, gnssPosition: false });
    const list = journal(clock, outside(wheel, 100, 150), gnss);
    const [r] = look(p, list, [140]);
    expect(r?.source).toBe('none');
    expect(sheetOf(p, list).aidsUsed).toEqual(['wheel']);
  });

  it('position only: lines between positions', () => {
    const p = aids({ wheel: false, gnssSpeed: false });
    const list = journal(clock, positions(motion, 200));
    const [r] = look(p, list, [150]);
    expect(r?.source).toBe('gnss');
    expect(Math.abs((r?.distance as number) - motion.metresAt(150))).toBeLessThan(4);
    expect(sheetOf(p, list).aidsUsed).toEqual(['gnss position']);
    expect(look(aids({ wheel: false, gnssSpeed: false, gnssPosition: false }), list, [150])[0]).toMatchObject({
      source: 'none',
      speed: null,
    });
  });

  it('the tablet’s own location stays out while the receiver talks', () => {
    const own = gnss.map((o) => ({ ...o, at: o.at + us(TABLET_S - RECEIVER_S) - us(0), via: 'geolocation' as const }) as NewObservation);
    const p = aids({ wheel: false });
    const [a, b] = [look(p, journal(clock, gnss), [150]), look(p, journal(clock, gnss, own), [150])];
    expect(b[0]?.distance).toBe(a[0]?.distance);
    const [c] = look(p, journal(clock, own), [150]);
    expect(Math.abs((c?.distance as number) - motion.metresAt(150))).toBeLessThan(6);
  });

  it('late and out-of-order fixes are not believed', () => {
    const stale = fixes(motion, { until: 200, hz: 1 }).map((o, i) => ({ ...o, seq: i }));
    const p = aids({ wheel: false });
    const list = journal(clock, gnss);
    const mixed = [...list, ...stale.map((o) => o as never)].map((o, seq) => ({ ...(o as object), seq }) as never);
    expect(fold(p, mixed).derived).toEqual(fold(p, list).derived);
  });
});

describe('gnss gaps', () => {
  it('a short outage is bridged by the trapezoid, a long one by the straight line between positions', () => {
    const p = aids({ wheel: false });
    const both = fixes(motion, { until: 300, hz: 2, latency: RECEIVER_S }).map(
      (o) => ({ ...o, lat: 45 + motion.metresAt((o.at - RELEASE_US) / 1e6 - RECEIVER_S) / 111_131.745, lon: 7 }) as NewObservation,
    );
    const [short] = look(p, journal(clock, outside(both, 100, 115)), [130]);
    const [long] = look(p, journal(clock, outside(both, 100, 160)), [200]);
    expect(Math.abs((short?.distance as number) - motion.metresAt(130))).toBeLessThan(1);
    expect(Math.abs((long?.distance as number) - motion.metresAt(200))).toBeLessThan(3);
    const [silent] = look(p, journal(clock, outside(both, 100, 160), [act(110, { type: 'note.v1', text: '' })]), [110]);
    expect(silent?.warnings.map((w) => w.code)).toEqual(expect.arrayContaining(['gnss-lost', 'no-distance']));
  });

  it('a tap settles on GNSS alone', () => {
    const p = aids({ wheel: false });
    const t = instantOf(motion, 4_000);
    const sheet = sheetOf(p, journal(clock, fixes(motion, { until: 200, hz: 1, latency: RECEIVER_S }), [tapAt(t)]));
    expect(leg(sheet, 'settle')).toMatchObject({ by: 'tap', scaleKept: 'settle' });
    expect(Math.abs(leg(sheet, 'settle').movedM as number)).toBeLessThan(1);
  });
});
