import fc from 'fast-check';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { act, us } from '#tests/unit/pace/folds.ts';
import { pack } from '#tests/unit/pace/packs.ts';
import { wildObservations } from '#tests/unit/pace/wild-observations.ts';

/** Drives over the course that could happen: a car, touches with scatter, sensors that go, and things said in between. */

const UNTIL = 780;
const LATITUDE_OF_START = 50;
const METRES_PER_DEGREE = 111_229;

export interface Touch {
  /** Metres truly driven at the touch's place, and how late the hand is, s. */
  readonly metres: number;
  readonly late: number;
  readonly input: 'glass' | 'wired';
  readonly named: string | null;
}

const gap = fc
  .tuple(fc.integer({ min: 0, max: UNTIL }), fc.integer({ min: 1, max: 120 }))
  .map(([from, long]) => ({ from, to: from + long }));
const touch: fc.Arbitrary<Touch> = fc.record({
  metres: fc.oneof(fc.constantFrom(4_000, 12_000, 24_000, 28_000), fc.integer({ min: 0, max: 31_000 })),
  late: fc.oneof(fc.double({ min: -0.3, max: 0.3, noNaN: true }), fc.constantFrom(-3, 2.5, 4)),
  input: fc.constantFrom('glass' as const, 'wired' as const),
  named: fc.constantFrom(null, null, null, 'settle', 'one', 'two', 'three'),
});
const said = fc.oneof(
  fc.record({ type: fc.constantFrom('tap-voided.v1', 'tap-accepted.v1'), tap: fc.nat(9_000) }),
  fc.record({ type: fc.constant('tap-moved.v1'), tap: fc.nat(9_000), checkpoint: fc.constantFrom('settle', 'one', 'two', 'three') }),
  fc.record({ type: fc.constant('checkpoint-skipped.v1'), checkpoint: fc.constantFrom('settle', 'one', 'two', 'three') }),
  fc.record({ type: fc.constantFrom('run-stopped.v1', 'start-marked.v1') }),
  fc.record({ type: fc.constant('run-resumed.v1'), as: fc.constantFrom('racing', 'escort') }),
  fc.record({ type: fc.constant('target-set.v1'), targetTimeMs: fc.integer({ min: 700_000, max: 900_000 }) }),
  fc.record({
    type: fc.constantFrom('sensor-lost.v1', 'sensor-gained.v1'),
    sensor: fc.constantFrom('serial', 'simulator'),
    detail: fc.constant(''),
  }),
);
const kind = fc.record({
  speed: fc.integer({ min: 30, max: 45 }),
  reaction: fc.double({ min: 0, max: 2, noNaN: true }),
  metresPerPulse: fc.double({ min: 0.247, max: 0.253, noNaN: true }),
  hz: fc.constantFrom(2, 5),
  fixHz: fc.constantFrom(0, 0.5, 1),
  latency: fc.double({ min: 0, max: 1.5, noNaN: true }),
  lostPulses: fc.array(gap, { maxLength: 2 }),
  lostFixes: fc.array(gap, { maxLength: 2 }),
  second: fc.boolean(),
});

export interface Drive {
  readonly sensors: readonly NewObservation[];
  readonly touches: readonly NewObservation[];
}

function sensorsOf(k: typeof kind extends fc.Arbitrary<infer T> ? T : never): NewObservation[] {
  const motion = fromRest(2.5, k.speed, k.reaction);
  const options = { until: UNTIL, hz: k.hz, metresPerPulse: k.metresPerPulse };
  const outside = (gaps: readonly { from: number; to: number }[]) => (o: NewObservation) =>
    !gaps.some((g) => o.at >= us(g.from) && o.at < us(g.to));
  const placed = (o: NewObservation): NewObservation => {
    const d = motion.metresAt((o.at - us(0)) / 1e6 - k.latency);
    return o.type === 'fix.v1' ? { ...o, lat: LATITUDE_OF_START + d / METRES_PER_DEGREE, lon: 5, accuracy: 6 } : o;
  };
  const other = k.second ? pulses(motion, { ...options, channel: 1, metresPerPulse: k.metresPerPulse * 1.004 }) : [];
  const heard = k.fixHz === 0 ? [] : fixes(motion, { until: UNTIL, hz: k.fixHz, latency: k.latency }).map(placed);
  return [clockCheck(pack), ...[...pulses(motion, options), ...other].filter(outside(k.lostPulses)), ...heard.filter(outside(k.lostFixes))];
}

export const drives: fc.Arbitrary<Drive> = fc.tuple(kind, fc.array(touch, { maxLength: 8 })).map(([k, touches]) => {
  const motion = fromRest(2.5, k.speed, k.reaction);
  return { sensors: sensorsOf(k), touches: touches.map((t) => tapAt(instantOf(motion, t.metres) + t.late, t.named, t.input)) };
});

/** A drive with acts at any time and some wild observations in between, numbered. Late by up to 2 s against seq. */
export const wildDrives: fc.Arbitrary<Observation[]> = fc
  .tuple(
    drives,
    fc.array(fc.tuple(fc.integer({ min: -20, max: UNTIL }), said), { maxLength: 6 }),
    fc.oneof(fc.constant([] as Observation[]), wildObservations),
    fc.array(fc.tuple(fc.nat(9_000), fc.integer({ min: 1, max: 40 })), { maxLength: 4 }),
  )
  .map(([drive, acts, wild, late]) => {
    const list = journal(
      drive.sensors,
      drive.touches,
      acts.map(([t, o]) => act(t, o)),
    );
    wild.slice(0, 12).forEach((o, i) => void list.splice((i * 977) % list.length, 0, o));
    for (const [from, by] of late) {
      const [moved] = list.splice(from % list.length, 1);
      if (moved !== undefined) list.splice((from % list.length) + by, 0, moved);
    }
    return list.map((o, seq) => ({ ...o, seq }));
  });
