import { describe, expect, it } from 'vitest';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { begin, type RunState, readout, snapshot, step } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses, RELEASE_US, tapAt } from '#tests/unit/pace/drives.ts';
import { headerOf, pack } from '#tests/unit/pace/packs.ts';

/** A run is the fold of its journal: total, deterministic, and the same however it is cut. */

const fold = (observations: readonly Observation[], state: RunState = begin(pack)): RunState => {
  for (const o of observations) step(state, o);
  return state;
};

const motion = fromRest(2.5, 41, 0.4);
const drive = (): NewObservation[][] => [
  [clockCheck(pack)],
  pulses(motion, { until: 760, hz: 20, metresPerPulse: 0.2507 }),
  fixes(motion, { until: 760, hz: 1, latency: 0.2 }),
  [tapAt(instantOf(motion, 4_000)), tapAt(instantOf(motion, 12_000)), tapAt(instantOf(motion, 24_000), 'two')],
];

describe('a whole run', () => {
  const observations = journal(...drive());
  const straight = fold(observations);

  it('is the same through snapshots stored as JSON every few seconds', () => {
    let state = begin(pack);
    for (const [i, o] of observations.entries()) {
      step(state, o);
      if (i % 997 === 0) state = JSON.parse(JSON.stringify(snapshot(state))) as RunState;
    }
    expect(state).toEqual(straight);
  });

  it('a snapshot is not touched by further steps', () => {
    const half = fold(observations.slice(0, 9_000));
    const kept = snapshot(half);
    const text = JSON.stringify(kept);
    fold(observations.slice(9_000), half);
    expect(JSON.stringify(kept)).toBe(text);
  });

  it('readout changes nothing', () => {
    const state = fold(observations.slice(0, 9_000));
    const text = JSON.stringify(state);
    for (let at = state.now - 3_000_000; at < state.now + 3_000_000; at += 250_000) readout(state, micros(at));
    expect(JSON.stringify(state)).toBe(text);
  });

  it.each([2_000, 6_000, 13_000, 21_000, 27_500])(
    'a tap at %d m, voided later, leaves everything as if it had never been made',
    (metres) => {
      const extra = tapAt(instantOf(motion, metres) + 3);
      const when = instantOf(motion, metres) + 40;
      const voided: NewObservation = { type: 'note.v1', at: Math.round(RELEASE_US + when * 1e6), text: '' };
      const without = journal(...drive(), [voided]);
      const list = journal(...drive(), [extra], [voided]);
      const seq = list.find((o) => o.type === 'tap.v1' && o.at === extra.at)?.seq as number;
      const withVoid = list.map((o): Observation => (o.type === 'note.v1' ? { seq: o.seq, at: o.at, type: 'tap-voided.v1', tap: seq } : o));
      const [a, b] = [fold(without), fold(withVoid)];
      const { taps: _a, ...derivedA } = a.derived;
      const { taps: _b, ...derivedB } = b.derived;
      const bySeq = (d: typeof derivedA): unknown => ({ ...d, passings: d.passings.map(({ tap: _, ...rest }) => rest) });
      expect(bySeq(derivedB)).toEqual(bySeq(derivedA));
      expect(b.odometer).toEqual(a.odometer);
      const { taps: sheetTapsA, observations: _oa, ...sheetA } = runSheet(a, headerOf(pack));
      const { taps: sheetTapsB, observations: _ob, ...sheetB } = runSheet(b, headerOf(pack));
      expect(sheetB).toEqual(sheetA);
      expect(sheetTapsB.length).toBe(sheetTapsA.length + 1);
      expect(sheetTapsB.find((t) => t.seq === seq)?.verdict).toBe('voided');
    },
  );

  it('a voided tap stops mattering at once, also to what is shown', () => {
    // at half past: the tap is wrong by 60 m, and voided 20 s later; 12 s after that the displays have caught up
    const t = instantOf(motion, 12_000);
    const wrong = tapAt(t + 1.2, 'one');
    const upTo = (list: Observation[]): Observation[] => list.filter((o) => o.at <= RELEASE_US + (t + 33) * 1e6);
    const drives = (taps: NewObservation[]): Observation[] =>
      upTo(journal([clockCheck(pack)], pulses(motion, { until: 400, hz: 20 }), taps));
    const at = Math.round(RELEASE_US + (t + 20) * 1e6);
    const a = fold(drives([{ type: 'note.v1', at, text: '' }]));
    const list = drives([wrong, { type: 'note.v1', at, text: '' }]);
    const seq = list.find((o) => o.type === 'tap.v1')?.seq as number;
    const b = fold(list.map((o): Observation => (o.type === 'note.v1' ? { seq: o.seq, at: o.at, type: 'tap-voided.v1', tap: seq } : o)));
    const now = micros(a.now);
    const { lastTap: _a, ...shownA } = readout(a, now);
    const { lastTap, ...shownB } = readout(b, now);
    expect(shownB).toEqual(shownA);
    expect(lastTap?.verdict).toBe('voided');
  });
});
