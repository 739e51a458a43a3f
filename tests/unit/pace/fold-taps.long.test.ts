import fc from 'fast-check';
import { describe, expect, it, vi } from 'vitest';
import type { Pack } from '#shared/course/pack.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { readout } from '#shared/pace/run.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import { type Drive, drives } from '#tests/unit/pace/arbitrary-drives.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { firstDifference } from '#tests/unit/pace/first-difference.ts';
import { act, fold, look } from '#tests/unit/pace/folds.ts';
import { headerOf, pack, place } from '#tests/unit/pace/packs.ts';
import { byRule, fullyFitted, SCALE_RULES } from '#tests/unit/pace/rules.ts';

/** What a tap may and may not do, by every rule of the wheel scale, over drives that could happen. */

vi.setConfig({ testTimeout: 120_000 });

/** A drive shrinks slowly and to little use: the first failure is told as it is, with its seed. */
const RUNS = { numRuns: 20, endOnFailure: true };
const equipped = fc.boolean().map((full) => (p: Pack) => (full ? fullyFitted(p) : p));

/** Everything shown but the word on the last tap. */
const shown = ({ lastTap: _, ...rest }: Readout): Omit<Readout, 'lastTap'> => rest;
/** Without what the displays remember of what the crew was told meanwhile: the speed to hold, the plan in force, the band's calm. */
const shownOfRun = ({ lastTap: _t, hold: _h, band: _b, planned: _p, againstPlan: _a, noReturn: _n, next, ...rest }: Readout): unknown => ({
  ...rest,
  next: next === null ? null : { ...next, planned: 0 },
});
/** Everything told but the list of taps and how many things happened. */
const told = ({ taps: _t, observations: _o, ...rest }: RunSheet): unknown => rest;

/** The drive with an act at t seconds, in place of which the other journal has a note: both are of the same length. */
const withAct = (drive: Drive, extra: readonly NewObservation[], t: number): Observation[] => {
  const note = act(t, { type: 'note.v1', text: '' });
  return journal(drive.sensors, drive.touches, extra, [note]);
};
/** The note becomes a void of the touch at that instant. */
function voiding(list: readonly Observation[], touch: NewObservation): Observation[] {
  const tap = list.find((o) => o.type === 'tap.v1' && o.at === touch.at) as Observation;
  return list.map((o): Observation => (o.type === 'note.v1' ? { seq: o.seq, at: o.at, type: 'tap-voided.v1', tap: tap.seq } : o));
}
/** Without the taps themselves, and without their numbers: one more touch shifts them. */
const unnumbered = (value: unknown): unknown =>
  JSON.parse(JSON.stringify(value, (key, inner) => (key === 'tap' || key === 'seq' || key === 'taps' ? undefined : inner)));

/** The path and both values stand in the failure's own words, which an assertion would cut. */
function same(a: unknown, b: unknown, what: string): void {
  const found = firstDifference(a, b, what);
  if (found !== null) throw new Error(`differs at ${found}`);
}

describe.each(SCALE_RULES)('by the rule "%s"', (rule) => {
  it('a tap voided later leaves everything as if it had never been made', () => {
    fc.assert(
      fc.property(drives, equipped, fc.integer({ min: 30, max: 700 }), fc.integer({ min: 1, max: 60 }), (drive, equip, t, after) => {
        const p = equip(byRule(rule));
        // an instant no other touch has
        const touch = tapAt(t + 0.000_123);
        const without = withAct(drive, [], t + after);
        const undone = voiding(withAct(drive, [touch], t + after), touch);
        const [a, b] = [fold(p, without), fold(p, undone)];
        same(b.odometer, a.odometer, 'odometer');
        same(unnumbered(b.derived), unnumbered(a.derived), 'derived');
        same(told(runSheet(b, headerOf(p))), told(runSheet(a, headerOf(p))), 'sheet');
        const times = [t + after + 1, t + after + 30, 775];
        same(look(p, undone, times).map(shownOfRun), look(p, without, times).map(shownOfRun), 'shown');
      }),
      RUNS,
    );
  });

  it('a tap that is not believed, among others that are, changes nothing that is shown', () => {
    let unused = 0;
    fc.assert(
      fc.property(drives, equipped, fc.integer({ min: 120, max: 700 }), (drive, equip, t) => {
        const p = equip(byRule(rule));
        const without = journal(drive.sensors, drive.touches);
        const touch = tapAt(t + 0.000_123);
        const withTap = journal(drive.sensors, drive.touches, [touch]);
        const state = fold(p, withTap);
        const seq = withTap.find((o) => o.type === 'tap.v1' && o.at === touch.at)?.seq;
        const verdict = state.derived.taps.find((x) => x.seq === seq)?.verdict;
        if (verdict !== 'doubted' && verdict !== 'no place near') return;
        const plain = fold(p, without);
        // where several touches contradict each other, one more may tip the search for the likeliest story
        if (plain.derived.taps.some((x) => x.verdict === 'doubted' || x.verdict === 'no place near')) return;
        unused++;
        same(unnumbered(state.derived), unnumbered(plain.derived), `derived, ${verdict}`);
        const now = micros(plain.now);
        same(shown(readout(state, now)), shown(readout(plain, now)), `shown, ${verdict}`);
      }),
      RUNS,
    );
    expect(unused).toBeGreaterThan(0);
  });

  it('a right tap with no misfit leaves the distance where it is and makes it surer', () => {
    fc.assert(
      fc.property(fc.integer({ min: 30, max: 44 }), fc.integer({ min: 200, max: 500 }), fc.boolean(), (speed, t, heard) => {
        const motion = fromRest(2.5, speed, 0.4);
        const until = t + 10;
        const sensors = [
          ...pulses(motion, { until, hz: 20, metresPerPulse: 0.2507 }),
          ...(heard ? fixes(motion, { until, hz: 1, latency: 0.2 }) : []),
        ];
        const plain = journal([clockCheck(pack)], sensors);
        const [before] = look(byRule(rule), plain, [t + 0.1]) as [Readout];
        // the place is printed where the engine believes the car to have been at the touch
        const [there] = look(byRule(rule), plain, [t]) as [Readout];
        const own = { ...place('here', 'scale', (there.distance / 1000).toFixed(7)), source: 'own' as const };
        const p: Pack = { ...byRule(rule), ownCheckpoints: [own] };
        const [after] = look(p, journal([clockCheck(pack)], sensors, [tapAt(t, 'here')]), [t + 0.1]) as [Readout];
        expect(after.lastTap?.verdict).toBe('used');
        // the place is printed to a tenth of a millimetre; reading between samples may differ by centimetres
        expect(Math.abs(after.lastTap?.moved ?? 1)).toBeLessThan(0.05);
        expect(Math.abs(after.distance - before.distance)).toBeLessThan(0.06);
        expect(after.sigma).toBeLessThan(before.sigma);
      }),
      RUNS,
    );
  });

  it('a wheel with shorter pulses, said to have them, tells the same distance', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 30, max: 44 }),
        fc.array(fc.double({ min: -0.2, max: 0.2, noNaN: true }), { minLength: 3, maxLength: 3 }),
        (speed, late) => {
          const motion = fromRest(2.5, speed, 0.4);
          const touches = [4_000, 12_000, 24_000].map((m, i) => tapAt(instantOf(motion, m) + (late[i] as number)));
          // pulses fine enough that reading between two of them is no part of it
          const distances = (mm: number): number[] => {
            const p = { ...byRule(rule), wheel: { ...pack.wheel, mmPerPulse: mm } };
            const list = journal([clockCheck(pack)], pulses(motion, { until: 650, hz: 10, metresPerPulse: (mm / 1000) * 1.002 }), touches);
            return look(p, list, [90, 200, 350, 500, 640]).map((r) => r.distance);
          };
          const [one, two] = [distances(10), distances(10 / 1.003)];
          one.forEach((d, i) => void expect(Math.abs(d - (two[i] as number))).toBeLessThan(0.1));
        },
      ),
      RUNS,
    );
  });

  it('at a standstill the time error grows as the clock does', () => {
    fc.assert(
      fc.property(fc.integer({ min: 60, max: 600 }), fc.integer({ min: 30, max: 44 }), (stopAt, speed) => {
        const drive = fromRest(2.5, speed, 0.4);
        const motion = { metresAt: (t: number) => drive.metresAt(Math.min(t, stopAt)) };
        const list = journal([clockCheck(pack)], pulses(motion, { until: stopAt + 60, hz: 10 }), [tapAt(instantOf(drive, 2_000))]);
        const times = Array.from({ length: 90 }, (_, i) => stopAt + 8 + i * 0.5);
        const errors = look(byRule(rule), list, times).map((r) => r.timeError as number);
        errors.slice(1).forEach((e, i) => void expect(e - (errors[i] as number)).toBeCloseTo(0.5, 6));
      }),
      RUNS,
    );
  });
});
