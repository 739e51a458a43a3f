import { describe, expect, it } from 'vitest';
import type { NewObservation } from '#shared/journal/observation.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses } from '#tests/unit/pace/drives.ts';
import { look, sheetOf, us } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';

const motion = fromRest(2.5, 40, 0.4);
const clock = [clockCheck(pack)];
const outside = (list: NewObservation[], from: number, to: number): NewObservation[] =>
  list.filter((o) => !(o.at > us(from) && o.at < us(to)));

describe('the wheel comes back after GNSS carried on, or does not', () => {
  it('a scale 1 % off: what the count moves on its return is told, and nothing else moves', () => {
    const off = { ...pack, wheel: { ...pack.wheel, mmPerPulse: 252.5 } };
    const list = journal(clock, outside(pulses(motion, { until: 300 }), 120, 180), fixes(motion, { until: 300, hz: 5 }));
    const times = Array.from({ length: 160 }, (_, i) => 170 + i / 8);
    const shown = look(off, list, times);
    const moves = shown.slice(1).map((r, i) => r.distance - (shown[i] as (typeof shown)[number]).distance - 40 / 8);
    const jump = Math.max(...moves);
    // 60 s at 40 m/s by a scale 1 % long
    expect(Math.abs(jump - 24)).toBeLessThan(1);
    const told = shown.flatMap((r) => r.warnings.flatMap((w) => (w.code === 'wheel-back' ? [w.moved] : [])));
    expect(told.length).toBeGreaterThan(60);
    for (const moved of told) expect(Math.abs(moved - jump)).toBeLessThan(0.5);
    expect(moves.filter((m) => Math.abs(m) > 0.5)).toHaveLength(1);
  });

  it('a count that missed a third of the gap is not believed: the bridged metres stand', () => {
    const missed = Math.floor(20 * 40 * 4);
    const list = outside(pulses(motion, { until: 300 }), 120, 180).map((o) =>
      o.type === 'pulse.v1' && o.at >= us(180) ? { ...o, count: o.count - missed } : o,
    );
    const few = outside(pulses(motion, { until: 300 }), 120, 180).map((o) =>
      o.type === 'pulse.v1' && o.at >= us(180) ? { ...o, count: o.count - Math.floor(missed / 3) } : o,
    );
    for (const drive of [list, few]) {
      const [after] = look(pack, journal(clock, drive, fixes(motion, { until: 300, hz: 5 })), [200]);
      expect(Math.abs((after?.distance as number) - motion.metresAt(200))).toBeLessThan(1.5);
    }
  });

  it('a wheel that never comes back: GNSS goes on to the finish', () => {
    const list = journal(clock, outside(pulses(motion, { until: 770 }), 300, 800), fixes(motion, { until: 790, hz: 5 }));
    const sheet = sheetOf(pack, list);
    expect(Math.abs((sheet.finish?.elapsedS as number) - instantOf(motion, 30_000))).toBeLessThan(0.05);
    expect(sheet.aidsUsed).toEqual(['wheel', 'gnss speed']);
  });
});
