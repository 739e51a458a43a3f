import { describe, expect, it } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation } from '#shared/journal/observation.ts';
import { clockCheck, fixes, fromRest, journal, type Motion, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { fold, leg, look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack, withClass } from '#tests/unit/pace/packs.ts';

/** A wheel sensor with faults, in a whole run: what the crew is told, and what the run sheet says. */

const motion = fromRest(2.5, 40, 0.4);
const alone = withClass(pack, { aids: { ...pack.raceClass.aids, gnssSpeed: false, gnssPosition: false } });
const clock = [clockCheck(pack)];

/** Pulses of a wheel that counts nothing from one instant to another. */
function missing(from: number, to: number, until = 200, channel = 0, metresPerPulse = 0.25): NewObservation[] {
  const passed = (t: number): number => Math.floor(motion.metresAt(t) / metresPerPulse + 1e-9);
  return pulses(motion, { until, channel, metresPerPulse }).map((o) => {
    if (o.type !== 'pulse.v1') return o;
    const t = (o.at - us(0)) / 1e6;
    return { ...o, count: o.count - (t <= from ? 0 : passed(Math.min(t, to)) - passed(from)) };
  });
}
const codes = (r: { warnings: readonly { code: string }[] } | undefined): string[] => r?.warnings.map((w) => w.code) ?? [];

describe('pulses that are missing for a while', () => {
  const list = journal(clock, missing(100, 100.8));

  it('go on in the distance, and the crew is told for some seconds', () => {
    const [before, during, after, later] = look(alone, list, [99, 100.6, 103, 115]);
    expect(codes(before)).not.toContain('pulses-filled');
    expect(codes(during)).toContain('pulses-filled');
    expect(codes(after)).toContain('pulses-filled');
    expect(codes(later)).not.toContain('pulses-filled');
    for (const [r, t] of [
      [during, 100.6],
      [after, 103],
      [later, 115],
    ] as const) {
      expect(Math.abs((r?.distance as number) - motion.metresAt(t))).toBeLessThan(1.5);
      expect(r).toMatchObject({ source: 'wheel' });
    }
    expect((after?.sigma as number) - (before?.sigma as number)).toBeGreaterThan(0);
  });

  it('are told in the run sheet, and are no loss', () => {
    const { warnings } = sheetOf(alone, list);
    expect(warnings.join()).toMatch(/Pulses were missing once: 3[012]\u00a0m were filled in/);
    expect(warnings.join()).not.toContain('nothing measured it');
  });

  it('a touch meanwhile counts where the car was', () => {
    // the settle place lies at 4000 m, passed at 108.4 s
    const t = 108.4;
    const touched = sheetOf(alone, journal(clock, missing(108, 108.8), [tapAt(t)]));
    expect(leg(touched, 'settle').by).toBe('tap');
    expect(Math.abs(leg(touched, 'settle').movedM as number)).toBeLessThan(2);
  });

  it.each([0.4, 0.8, 1.6])('with GNSS beside it %d s are filled once, not twice', (gap) => {
    const with5Hz = journal(clock, missing(100, 100 + gap), fixes(motion, { until: 200, hz: 5, latency: 0.16 }));
    const looks = look(pack, with5Hz, [100.3, 101, 101.5, 102, 103, 105, 110, 150]);
    looks.forEach((r, i) => {
      const t = [100.3, 101, 101.5, 102, 103, 105, 110, 150][i] as number;
      expect(Math.abs(r.distance - motion.metresAt(t))).toBeLessThan(3);
    });
    // neither did distance follow GNSS and come back
    expect(fold(pack, with5Hz).odometer.comparison.slip).toMatchObject({ active: null, done: [] });
  });
});

describe('a sensor that dies', () => {
  it('without GNSS: two seconds are carried on, then the wheel is lost', () => {
    const list = journal(clock, missing(100, 300));
    const [carried, lost] = look(alone, list, [101.5, 105]);
    expect(Math.abs((carried?.distance as number) - motion.metresAt(101.5))).toBeLessThan(1);
    expect(lost).toMatchObject({ source: 'none', speed: null });
    expect(codes(lost)).toEqual(expect.arrayContaining(['wheel-lost', 'no-distance']));
  });

  it('with GNSS: that carries on, and hands back without a jump', () => {
    const times = Array.from({ length: 100 }, (_, i) => 99 + i * 0.25);
    const list = journal(clock, missing(100, 112), fixes(motion, { until: 200, hz: 5, latency: 0.16 }));
    look(pack, list, times).forEach((r, i) => {
      expect(Math.abs(r.distance - motion.metresAt(times[i] as number))).toBeLessThan(5);
    });
    expect(fold(pack, list).odometer.fills.count).toBe(0);
  });
});

describe('a second wheel', () => {
  const two: Pack = { ...alone, wheel: { ...alone.wheel, secondChannel: 1 } };
  const second = pulses(motion, { until: 200, channel: 1, metresPerPulse: 0.4 });

  it('stands in, and the crew is told', () => {
    const list = journal(clock, missing(100, 130), second);
    const [before, during, after] = look(two, list, [99, 120, 150]);
    expect(codes(before)).not.toContain('second-wheel');
    expect(codes(during)).toContain('second-wheel');
    expect(codes(during)).not.toContain('wheel-lost');
    expect(during).toMatchObject({ source: 'wheel' });
    expect(during?.speed as number).toBeCloseTo(40, 0);
    expect(codes(after)).not.toContain('second-wheel');
    for (const [r, t] of [
      [during, 120],
      [after, 150],
    ] as const) {
      expect(Math.abs((r?.distance as number) - motion.metresAt(t))).toBeLessThan(3);
    }
    expect(sheetOf(two, list).warnings.join()).toMatch(/The second wheel stood in once, for 1\d\d\d\u00a0m/);
  });

  it('comes before GNSS', () => {
    const p: Pack = { ...pack, wheel: { ...pack.wheel, secondChannel: 1 } };
    const list = journal(clock, missing(100, 130), second, fixes(motion, { until: 200, hz: 5, latency: 0.16 }));
    expect(look(p, list, [120])[0]).toMatchObject({ source: 'wheel' });
    expect(fold(p, list).odometer.bridges).toBe(0);
  });

  it('that says otherwise is told, in the run sheet too', () => {
    const slipping: Motion = { metresAt: (t) => motion.metresAt(t) + 0.02 * Math.max(0, motion.metresAt(t) - 3_000) };
    const list = journal(clock, pulses(slipping, { until: 200 }), second);
    const [before, after] = look(two, list, [80, 120]);
    expect(codes(before)).not.toContain('wheels-disagree');
    expect(codes(after)).toContain('wheels-disagree');
    expect(sheetOf(two, list).warnings.join()).toContain('The two wheels disagreed once');
  });
});

it('driven wheels make the place after the launch unsure by eight metres', () => {
  const sigma = (driven: boolean): number =>
    Math.sqrt(
      fold({ ...alone, wheel: { ...alone.wheel, driven } }, journal(clock, pulses(motion, { until: 20 }))).derived.anchors[0]?.variance ??
        0,
    );
  expect(Math.hypot(sigma(false), 8)).toBeCloseTo(sigma(true), 6);
});
