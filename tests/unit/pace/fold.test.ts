import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { NewObservation, Observation, UnknownObservation } from '#shared/journal/observation.ts';
import { begin, type RunState, readout, runSheet, snapshot, step } from '#shared/pace/run.ts';
import { micros } from '#shared/units.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses, RELEASE_US, tapAt } from '#tests/unit/pace/drives.ts';
import { headerOf, pack, withSettings } from '#tests/unit/pace/packs.ts';

/** A run is the fold of its journal: total, deterministic, and the same however it is cut. */

const fold = (observations: readonly (Observation | UnknownObservation)[], state: RunState = begin(pack)): RunState => {
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

/** Values that a known field may hold in a damaged or newer journal. */
const junk = fc.oneof(
  fc.integer(),
  fc.double(),
  fc.constant(null),
  fc.constant(undefined),
  fc.string({ maxLength: 6 }),
  fc.boolean(),
  fc.constantFrom(
    'start',
    'settle',
    'one',
    'two',
    'three',
    'finish',
    'board',
    'glass',
    'wired',
    'nmea',
    'racing',
    'escort',
    'exchange',
    'wall',
  ),
  fc.record({ text: fc.constantFrom('0', '5.5', '29.99', '-3', 'x', '1e9'), unit: fc.constantFrom('km', 'mi', 'km/h', 'mph', 'ell') }),
);
const types = [
  'pulse.v1',
  'button.v1',
  'pps.v1',
  'fix.v1',
  'sensor-gained.v1',
  'sensor-lost.v1',
  'epoch.v1',
  'clock.v1',
  'clock-pair.v1',
  'tap.v1',
  'tap-voided.v1',
  'tap-moved.v1',
  'tap-accepted.v1',
  'checkpoint-skipped.v1',
  'start-marked.v1',
  'release-set.v1',
  'target-set.v1',
  'staged-set.v1',
  'limit-set.v1',
  'line-moved.v1',
  'run-stopped.v1',
  'run-resumed.v1',
  'run-ended.v1',
  'finish-shown.v1',
  'note.v1',
  'tyre-pressure.v3',
  'constructor',
  '__proto__',
];
const near = fc.integer({ min: RELEASE_US - 30_000_000, max: RELEASE_US + 900_000_000 });
const count = fc.integer({ min: 0, max: 2 ** 32 - 1 });
const printedAt = fc.record({
  text: fc.constantFrom('0', '0.1', '5.5', '29.99', '31', '99', 'x'),
  unit: fc.constantFrom('km' as const, 'mi' as const),
});
const printedLimit = fc.record({ text: fc.constantFrom('0', '1', '30', '300'), unit: fc.constantFrom('km/h' as const, 'mph' as const) });
const placeId = fc.constantFrom('start', 'settle', 'one', 'two', 'three', 'finish', 'board', 'nowhere');
const seqRef = fc.integer({ min: 0, max: 120 });
const sound = fc.oneof(
  fc.record({ type: fc.constant('pulse.v1'), at: near, channel: fc.constantFrom(0, 1), count, boxUs: count }),
  fc.record({ type: fc.constant('button.v1'), at: near, button: fc.constant(1), presses: fc.integer({ min: 0, max: 9 }), boxUs: count }),
  fc.record({
    type: fc.constant('fix.v1'),
    at: near,
    via: fc.constantFrom('nmea', 'geolocation'),
    lat: fc.option(fc.double({ min: -90, max: 90, noNaN: true })),
    lon: fc.option(fc.double({ min: -180, max: 180, noNaN: true })),
    speed: fc.option(fc.double({ min: 0, max: 130, noNaN: true })),
    course: fc.constant(null),
    accuracy: fc.constant(null),
    utcMs: fc.constant(null),
  }),
  fc.record({
    type: fc.constant('clock.v1'),
    at: near,
    source: fc.constantFrom('exchange', 'pps', 'wall'),
    officialMs: fc.double({ min: 1.7e12, max: 1.9e12, noNaN: true }),
    uncertaintyMs: fc.double({ min: 0, max: 1e4, noNaN: true }),
  }),
  fc.record({ type: fc.constant('tap.v1'), at: near, input: fc.constantFrom('glass', 'wired'), checkpoint: fc.option(placeId) }),
  fc.record({ type: fc.constantFrom('tap-voided.v1', 'tap-accepted.v1'), at: near, tap: seqRef }),
  fc.record({ type: fc.constant('tap-moved.v1'), at: near, tap: seqRef, checkpoint: placeId }),
  fc.record({ type: fc.constant('checkpoint-skipped.v1'), at: near, checkpoint: placeId }),
  fc.record({ type: fc.constantFrom('start-marked.v1', 'run-stopped.v1'), at: near }),
  fc.record({ type: fc.constant('release-set.v1'), at: near, releaseMs: fc.double({ min: 1.79e12, max: 1.81e12, noNaN: true }) }),
  fc.record({ type: fc.constant('target-set.v1'), at: near, targetTimeMs: fc.integer({ min: -1, max: 4_000_000 }) }),
  fc.record({ type: fc.constant('staged-set.v1'), at: near, behindM: fc.integer({ min: -5, max: 50 }) }),
  fc.record({
    type: fc.constant('limit-set.v1'),
    at: near,
    zone: fc.constantFrom('a', 'b'),
    from: printedAt,
    to: printedAt,
    limit: printedLimit,
  }),
  fc.record({ type: fc.constant('line-moved.v1'), at: near, checkpoint: placeId, to: printedAt }),
  fc.record({ type: fc.constant('run-resumed.v1'), at: near, as: fc.constantFrom('racing', 'escort') }),
  fc.record({ type: fc.constant('run-ended.v1'), at: near, outcome: fc.constantFrom('finished', 'void') }),
);
const damaged = fc.record({
  type: fc.constantFrom(...types),
  at: fc.oneof(near, junk),
  channel: junk,
  count: junk,
  boxUs: junk,
  presses: junk,
  button: junk,
  checkpoint: junk,
  tap: junk,
  to: junk,
  from: junk,
  limit: junk,
  speed: junk,
  lat: junk,
  lon: junk,
  source: junk,
  officialMs: junk,
  uncertaintyMs: junk,
  releaseMs: junk,
  targetTimeMs: junk,
  behindM: junk,
  as: junk,
  outcome: junk,
  via: junk,
  input: junk,
  zone: junk,
});
const anything = fc
  .array(fc.oneof({ arbitrary: sound, weight: 4 }, { arbitrary: damaged, weight: 1 }), { maxLength: 120 })
  .map((list) => list.map((o, seq) => ({ ...o, seq })) as unknown as Observation[]);
const rules = fc.constantFrom('scheduled' as const, 'beam' as const, 'flag' as const);
const scaleRule = fc.constantFrom('ratio' as const, 'gain' as const, 'place only' as const);

/** JSON knows no negative zero, and nothing here depends on one; everything else must be the same value. */
function zeroes(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(zeroes);
  if (typeof value === 'object' && value !== null) return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, zeroes(v)]));
  return value === 0 ? 0 : value;
}

describe('whatever a journal holds', () => {
  it('step never throws, readout and run sheet always answer, and two folds are one', () => {
    fc.assert(
      fc.property(anything, rules, scaleRule, (observations, timeStart, rule) => {
        const p = { ...withSettings(pack, { scaleRule: rule }), event: { ...pack.event, rules: { ...pack.event.rules, timeStart } } };
        const [one, two] = [begin(p), begin(p)];
        for (const o of observations) {
          step(one, o);
          readout(one, micros(one.now));
        }
        for (const o of observations) step(two, o);
        expect(two).toEqual(one);
        expect(runSheet(one, headerOf(p))).toEqual(runSheet(two, headerOf(p)));
        readout(one, micros(0));
        readout(one, micros(RELEASE_US + 3_600_000_000));
      }),
      { numRuns: 150 },
    );
  }, 30_000);

  it('a snapshot taken anywhere, stored as JSON, goes on to the same state', () => {
    fc.assert(
      fc.property(anything, fc.nat({ max: 120 }), (observations, cut) => {
        const straight = fold(observations);
        const half = fold(observations.slice(0, cut));
        const stored = JSON.parse(JSON.stringify(snapshot(half))) as RunState;
        expect(zeroes(fold(observations.slice(cut), stored))).toEqual(zeroes(straight));
      }),
      { numRuns: 100 },
    );
  }, 30_000);

  it('deriving again changes nothing: live and hindsight are one', () => {
    fc.assert(
      fc.property(anything, (observations) => {
        const state = fold(observations);
        const before = snapshot(state);
        // voiding a tap that never was derives everything anew
        const at = state.now;
        step(state, { seq: 10_000, at, type: 'tap-voided.v1', tap: -1 });
        expect(state.derived).toEqual(before.derived);
      }),
      { numRuns: 150 },
    );
  }, 30_000);
});

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
