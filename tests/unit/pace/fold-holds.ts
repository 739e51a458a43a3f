import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { CockpitSettings, Pack } from '#shared/course/pack.ts';
import type { Observation, UnknownObservation } from '#shared/journal/observation.ts';
import { begin, type RunState, readout, snapshot, step } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { micros } from '#shared/units.ts';
import { RELEASE_US } from '#tests/unit/pace/drives.ts';
import { firstDifference } from '#tests/unit/pace/first-difference.ts';
import { headerOf } from '#tests/unit/pace/packs.ts';
import { byRule, fullyFitted, startedBy, TIME_STARTS } from '#tests/unit/pace/rules.ts';

/** What holds of a fold whatever the journal holds: it is total, deterministic and the same however it is cut. */

export type Any = Observation | UnknownObservation;
const fold = (observations: readonly Any[], state: RunState): RunState => {
  for (const o of observations) step(state, o);
  return state;
};

const packs = fc.record({ fitted: fc.boolean(), timeStart: fc.constantFrom(...TIME_STARTS) }).map(
  ({ fitted, timeStart }) =>
    (p: Pack) =>
      startedBy(fitted ? fullyFitted(p) : p, timeStart),
);

/** Path of the first value that JSON would change; null for none. */
function unstorable(value: unknown, path = 'state'): string | null {
  if (typeof value === 'number') return Number.isFinite(value) ? null : `${path} is ${value}`;
  if (value === null || typeof value === 'string' || typeof value === 'boolean') return null;
  if (typeof value !== 'object') return `${path} is ${typeof value}`;
  for (const [key, inner] of Object.entries(value)) {
    const found = unstorable(inner, `${path}.${key}`);
    if (found !== null) return found;
  }
  return null;
}

/** The checks, for one rule of the wheel scale. `lookEvery`: a readout after every so many observations. */
export function holdsOf(
  anything: fc.Arbitrary<readonly Any[]>,
  rule: CockpitSettings['scaleRule'],
  { lookEvery, ...runs }: { readonly lookEvery: number; readonly numRuns: number; readonly endOnFailure?: boolean },
): void {
  describe(`by the rule "${rule}"`, () => {
    it('step never throws, readout and run sheet always answer, and two folds are one', () => {
      fc.assert(
        fc.property(anything, packs, (observations, equip) => {
          const p = equip(byRule(rule));
          const [one, two] = [begin(p), begin(p)];
          observations.forEach((o, i) => {
            step(one, o);
            if (i % lookEvery === 0) readout(one, micros(one.now));
          });
          fold(observations, two);
          expect(firstDifference(two, one, 'state')).toBeNull();
          expect(runSheet(one, headerOf(p))).toEqual(runSheet(two, headerOf(p)));
          readout(one, micros(0));
          readout(one, micros(RELEASE_US + 3_600_000_000));
        }),
        runs,
      );
    });

    it('the state is plain data that JSON keeps', () => {
      fc.assert(
        fc.property(anything, packs, (observations, equip) => {
          const { pack: _, ...state } = fold(observations, begin(equip(byRule(rule))));
          expect(unstorable(state)).toBeNull();
        }),
        runs,
      );
    });

    it('cut anywhere, stored as JSON and taken up again, it comes to the same state, bit by bit', () => {
      fc.assert(
        fc.property(anything, packs, fc.array(fc.nat({ max: 9_000 }), { minLength: 1, maxLength: 4 }), (observations, equip, cuts) => {
          const p = equip(byRule(rule));
          const straight = fold(observations, begin(p));
          let state = begin(p);
          let from = 0;
          for (const cut of cuts.map((c) => c % (observations.length + 1)).sort((a, b) => a - b)) {
            state = JSON.parse(JSON.stringify(snapshot(fold(observations.slice(from, cut), state)))) as RunState;
            from = cut;
          }
          fold(observations.slice(from), state);
          expect(firstDifference(state, straight, 'state')).toBeNull();
          expect(runSheet(state, headerOf(p))).toEqual(runSheet(straight, headerOf(p)));
        }),
        runs,
      );
    });

    it('deriving again changes nothing: live and hindsight are one', () => {
      fc.assert(
        fc.property(anything, packs, (observations, equip) => {
          const state = fold(observations, begin(equip(byRule(rule))));
          const before = snapshot(state);
          // voiding a tap that never was derives everything anew
          step(state, { seq: 10_000, at: state.now, type: 'tap-voided.v1', tap: -1 });
          expect(firstDifference(state.derived, before.derived, 'derived')).toBeNull();
        }),
        runs,
      );
    });
  });
}
