import { describe, expect, it } from 'vitest';
import type { Aids } from '#shared/course/race-class.ts';
import { createRandom } from '#shared/drive/random.ts';
import type { FixV1, NewObservation } from '#shared/journal/observation.ts';
import { type Gnss, gnssMetresAt, makeGnss, takeFix } from '#shared/pace/gnss.ts';
import { us } from '#tests/unit/pace/folds.ts';
import { noisyFixes, zoned } from '#tests/unit/pace/gnss-drives.ts';

const SPEED: Aids = { wheel: true, gnssSpeed: true, gnssPosition: false, dataLink: false };
const BOTH: Aids = { ...SPEED, gnssPosition: true };
const LATE = 0.15;

function all(fixes: readonly NewObservation[], aids: Aids = SPEED): Gnss {
  const gnss = makeGnss();
  let now = 0;
  fixes.forEach((fix, seq) => {
    now = Math.max(now, fix.at);
    takeFix(gnss, { ...fix, seq } as FixV1, aids, now);
  });
  return gnss;
}
const drive = (more: Partial<Parameters<typeof noisyFixes>[1]> = {}): NewObservation[] =>
  noisyFixes(zoned, { until: 120, latency: LATE, jitter: 0, seed: 1, ...more });
const off = (gnss: Gnss, t: number): number => (gnssMetresAt(gnss, us(t)) as number) - zoned.metresAt(t);
const straight = (metres: number): { lat: number; lon: number; course: number } => ({ lat: 45 + metres / 111_131.745, lon: 7, course: 0 });

describe('metres by GNSS', () => {
  it.each([1, 5, 10, 20])('at %i Hz: the integral of speed as of the true instant, within what its noise adds up to', (hz) => {
    const gnss = all(drive({ hz }));
    // 0.08 m/s at each of hz fixes a second for 120 s: 0.08·√(120/hz); and 0.3 m for a corner of speed between two fixes at 1 Hz
    for (const t of [116, 118, 119]) expect(Math.abs(off(gnss, t))).toBeLessThan(3 * 0.08 * Math.sqrt(120 / hz) + 0.6 / hz);
  });

  it('fixes at uneven intervals lose nothing', () => {
    const random = createRandom(3, 'kept');
    for (let run = 0; run < 10; run++) {
      const uneven = drive({ hz: 10, seed: run }).filter((o) => o.at > us(118) || random.unit() < 0.3);
      expect(Math.abs(off(all(uneven), 119))).toBeLessThan(2.5);
    }
  });

  it('a fix without speed or place is as if it had not come', () => {
    const blind = drive({ hz: 5 }).map((o, i) => ((i * 7) % 20 < 4 ? { ...o, speed: null } : o)) as NewObservation[];
    const gnss = all(blind);
    expect(gnss.rejected).toBeGreaterThan(100);
    expect(Math.abs(off(gnss, 119))).toBeLessThan(2.5);
  });

  it('a pause of more than 3 s is marked, and what was driven in it is at least the straight line', () => {
    const placed = drive({ hz: 5, place: straight }).filter((o) => o.at < us(4) || o.at > us(24));
    const [by, with_] = [all(placed), all(placed, BOTH)];
    expect(by.brokenAt).toBeGreaterThan(us(24));
    expect(all(drive({ hz: 5 })).brokenAt).toBeLessThan(us(-9));
    // from 9 m/s up to 45 and steady there: a straight line between the two speeds falls short of the corner
    expect(off(by, 119)).toBeLessThan(-50);
    expect(Math.abs(off(with_, 119))).toBeLessThan(2.5);
  });

  it('sentences that jitter by 80 ms are dated by the receiver’s clock', () => {
    const jittered = drive({ hz: 5, jitter: 0.08 });
    const dated = all(jittered);
    const uneven = (gnss: Gnss): number =>
      Math.max(...gnss.recent.slice(1).map((knot, k) => Math.abs(knot.at - (gnss.recent[k] as { at: number }).at - 200_000)));
    expect(uneven(dated)).toBeLessThan(3_000);
    expect(uneven(all(jittered.map((o) => ({ ...o, utcMs: null }) as NewObservation)))).toBeGreaterThan(40_000);
    for (const t of [113, 115, 117, 119]) expect(Math.abs(off(dated, t) - off(dated, 112.5))).toBeLessThan(0.5);
  });

  it('a receiver whose clock is set, or says nonsense, is dated by its arrival', () => {
    const set = drive({ hz: 5 }).map(
      (o, i) => ({ ...o, utcMs: i < 200 ? 1e12 + i * 200 : i < 300 ? 1.9e12 + i * 200 : i < 320 ? 1e300 : 5 }) as NewObservation,
    );
    const gnss = all(set);
    expect(gnss.fixes).toBe(651 - gnss.rejected);
    expect(Math.abs(off(gnss, 119))).toBeLessThan(3);
  });
});
