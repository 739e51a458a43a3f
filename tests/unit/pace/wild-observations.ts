import fc from 'fast-check';
import type { Observation } from '#shared/journal/observation.ts';
import { RELEASE_US } from '#tests/unit/pace/drives.ts';

/** Observations about one run in any order: most of them sound and near the release, some with damaged fields. */

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
export const wildObservations = fc
  .array(fc.oneof({ arbitrary: sound, weight: 4 }, { arbitrary: damaged, weight: 1 }), { maxLength: 120 })
  .map((list) => list.map((o, seq) => ({ ...o, seq })) as unknown as Observation[]);
