import { describe, expect, it } from 'vitest';
import type { PulseV1 } from '#shared/journal/observation.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, RELEASE_US, tapAt } from '#tests/unit/pace/drives.ts';
import { metresOf, roll } from '#tests/unit/pace/faulty-sensor.ts';
import { look } from '#tests/unit/pace/folds.ts';
import { pack, withClass } from '#tests/unit/pace/packs.ts';

describe('the first records of a wheel', () => {
  it('lie anyhow beside each other: a short first step is no speed that the next ones must keep', () => {
    const metresPerPulse = 1 / 20_180;
    // as a recorded van at 34 km/h was switched on: 0.93 m in 34 ms, then 0.95 m each tenth of a second
    const counts = [0, 18_814, ...Array.from({ length: 30 }, (_, i) => 18_814 + (i + 1) * 19_100)];
    const records = counts.map((count, i): PulseV1 => {
      const at = 50_000_000 + (i === 0 ? 0 : 34_000 + (i - 1) * 100_000);
      return { type: 'pulse.v1', at, channel: 0, count, boxUs: at, seq: i };
    });
    for (const n of [3, 6, 12, records.length]) {
      const o = roll(records.slice(0, n), metresPerPulse);
      expect(metresOf(o, metresPerPulse)).toBeCloseTo((counts[n - 1] as number) * metresPerPulse, 6);
      expect(o.fills.count).toBe(0);
    }
  });
});

describe('an outage of GNSS as the only source', () => {
  const aids = { wheel: false, gnssSpeed: true, gnssPosition: false, dataLink: false };
  const motion = fromRest(2.5, 20);
  const silent = { from: RELEASE_US + 100e6, to: RELEASE_US + 120e6 };
  const heard = fixes(motion, { until: 400 }).filter((o) => o.at <= silent.from || o.at >= silent.to);
  const p = withClass(pack, { aids });

  it('widens the uncertainty as speed may have wandered in it: 26 m for 20 s', () => {
    const [before, after] = look(p, journal([clockCheck(p)], heard), [99, 121]);
    const widened = Math.sqrt((after?.sigma ?? 0) ** 2 - (before?.sigma ?? 0) ** 2);
    // 40 m/s is the pack's average
    expect(widened * 40).toBeGreaterThan(24);
    expect(widened * 40).toBeLessThan(28);
  });

  it('is unsure by as much as may have gone by, while nothing measures', () => {
    const [fresh, late] = look(p, journal([clockCheck(p)], heard), [101, 115]);
    expect(late?.source).toBe('none');
    const widened = Math.sqrt((late?.sigma ?? 0) ** 2 - (fresh?.sigma ?? 0) ** 2) * 40;
    // 15 s at 20 m/s, of which 2 s are carried on; six tenths of the rest, in time at the average of 40 m/s
    expect(widened).toBeGreaterThan(0.6 * 12.9 * 20);
    expect(widened).toBeLessThan(0.6 * 13.4 * 20);
  });

  it('leaves a touch believed that puts the distance right by as much', () => {
    // the car had in truth covered 45 m less in the dark: the place comes 45 m later than the speeds say
    const touch = tapAt(instantOf(motion, 4_045), 'settle');
    const [shown] = look(p, journal([clockCheck(p)], heard, [touch]), [210]);
    expect(shown?.lastTap).toMatchObject({ verdict: 'used' });
    expect(Math.abs((shown?.lastTap?.moved ?? 0) + 45)).toBeLessThan(5);
  });
});
