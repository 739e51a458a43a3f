import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { begin, type RunState, snapshot, step } from '#shared/pace/run.ts';
import { clockCheck, fixes, fromRest, journal, pulses, RELEASE_US } from '#tests/unit/pace/drives.ts';
import { pack } from '#tests/unit/pace/packs.ts';

/** Drives as they happen, with everything that goes wrong in them: what was derived on the way is what hindsight derives. */

const motion = fromRest(2.5, 41, 0.4);
const wheel = pulses(motion, { until: 760, hz: 10 });
const gnss = fixes(motion, { until: 760, hz: 1, latency: 0.3 });
const seconds = fc.double({ min: -8, max: 755, noNaN: true });
const placeId = fc.constantFrom('settle', 'one', 'two', 'three', 'finish', 'board');

const faultArb = fc.record({
  /** The wheel is silent from..for; it may come back with its count gone on, or begun anew. */
  silences: fc.array(fc.record({ from: seconds, for: fc.double({ min: 0.5, max: 60, noNaN: true }), restarts: fc.boolean() }), {
    maxLength: 3,
  }),
  wild: fc.array(seconds, { maxLength: 3 }),
  late: fc.double({ min: 0, max: 1.9, noNaN: true }),
  gnss: fc.boolean(),
});
const actArb = fc.oneof(
  {
    arbitrary: fc.record({
      t: seconds,
      type: fc.constant('tap.v1' as const),
      input: fc.constant('glass' as const),
      checkpoint: fc.option(placeId),
    }),
    weight: 6,
  },
  fc.record({ t: seconds, type: fc.constant('checkpoint-skipped.v1' as const), checkpoint: placeId }),
  fc.record({ t: seconds, type: fc.constant('void' as const), nth: fc.nat({ max: 7 }) }),
  fc.record({ t: seconds, type: fc.constant('accept' as const), nth: fc.nat({ max: 7 }) }),
  fc.record({ t: seconds, type: fc.constant('move' as const), nth: fc.nat({ max: 7 }), checkpoint: placeId }),
  fc.record({ t: seconds, type: fc.constant('run-stopped.v1' as const) }),
  fc.record({ t: seconds, type: fc.constant('run-resumed.v1' as const), as: fc.constantFrom('racing' as const, 'escort' as const) }),
);
type Act = typeof actArb extends fc.Arbitrary<infer T> ? T : never;
type Faults = typeof faultArb extends fc.Arbitrary<infer T> ? T : never;

const us = (t: number): number => Math.round(RELEASE_US + t * 1e6);

function faultyWheel(faults: Faults): NewObservation[] {
  let lost = 0;
  let booted = 0;
  const restarts = faults.silences.filter((s) => s.restarts).map((s) => ({ end: us(s.from + s.for), done: false }));
  const out: NewObservation[] = [];
  for (const o of wheel) {
    if (o.type !== 'pulse.v1' || faults.silences.some((s) => o.at > us(s.from) && o.at < us(s.from + s.for))) continue;
    for (const r of restarts) {
      if (r.done || o.at < r.end) continue;
      r.done = true;
      lost = o.count;
      booted = o.at - 20_000;
    }
    const boxUs = booted === 0 ? o.boxUs : o.at - booted;
    out.push({ ...o, count: o.count - lost, boxUs });
  }
  for (const t of faults.wild) out.push({ type: 'pulse.v1', at: us(t), channel: 0, count: 0, boxUs: 0 });
  return out;
}

/** Numbered in order of arrival (fixes come late), acts that name a tap filled in with its seq. */
function asItCame(faults: Faults, acts: readonly Act[]): Observation[] {
  const marked = acts.map((a): NewObservation & { nth?: number } => {
    const at = us(a.t);
    if (a.type === 'void') return { type: 'tap-voided.v1', at, tap: a.nth };
    if (a.type === 'accept') return { type: 'tap-accepted.v1', at, tap: a.nth };
    if (a.type === 'move') return { type: 'tap-moved.v1', at, tap: a.nth, checkpoint: a.checkpoint };
    const { t: _, ...rest } = a;
    return { ...rest, at } as NewObservation;
  });
  const sensors = faults.gnss ? [...faultyWheel(faults), ...gnss] : faultyWheel(faults);
  const list = journal([clockCheck(pack)], sensors, marked);
  const arrived = [...list]
    .sort((a, b) => arrival(a, faults) - arrival(b, faults) || a.seq - b.seq)
    .map((o, seq) => ({ ...o, seq }) as Observation);
  const taps = arrived.filter((o) => o.type === 'tap.v1').map((o) => o.seq);
  return arrived.map((o) => ('tap' in o ? { ...o, tap: taps[o.tap as number] ?? -1 } : o) as Observation);
}
const arrival = (o: Observation, faults: Faults): number => o.at + (o.type === 'fix.v1' ? faults.late * 1e6 : 0);

const derivedAnew = (state: RunState): RunState => {
  const copy = snapshot(state);
  step(copy, { seq: -1, at: state.now, type: 'tap-voided.v1', tap: -2 });
  return copy;
};

describe('live and hindsight', () => {
  it('agree to the last bit at every moment looked at, whatever fails and whatever is touched', () => {
    fc.assert(
      fc.property(
        faultArb,
        fc.array(actArb, { maxLength: 16 }),
        fc.array(fc.nat({ max: 8_000 }), { minLength: 4, maxLength: 8 }),
        (faults, acts, looks) => {
          const state = begin(pack);
          for (const [i, o] of asItCame(faults, acts).entries()) {
            step(state, o);
            if (looks.includes(i)) expect(derivedAnew(state).derived).toEqual(state.derived);
          }
          expect(derivedAnew(state).derived).toEqual(state.derived);
        },
      ),
      { numRuns: 20 },
    );
  }, 30_000);

  it('every tap voided is no tap at all', () => {
    fc.assert(
      fc.property(faultArb, fc.array(actArb, { maxLength: 10 }), (faults, acts) => {
        const observations = asItCame(
          faults,
          acts.filter((a) => a.type !== 'checkpoint-skipped.v1'),
        );
        const taps = observations.filter((o) => o.type === 'tap.v1');
        const [touched, untouched] = [begin(pack), begin(pack)];
        for (const o of observations) {
          step(touched, o);
          if (o.type !== 'tap.v1') step(untouched, o);
        }
        for (const [i, tap] of taps.entries()) step(touched, { seq: 20_000 + i, at: touched.now, type: 'tap-voided.v1', tap: tap.seq });
        expect({ ...touched.derived, taps: [] }).toEqual({ ...untouched.derived, taps: [] });
        expect(touched.odometer).toEqual(untouched.odometer);
      }),
      { numRuns: 15 },
    );
  }, 30_000);
});
