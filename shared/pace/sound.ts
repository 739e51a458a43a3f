import type { Observation, PulseV1, UnknownObservation } from '#shared/journal/observation.ts';

/** Whether an observation of a known type has what the engine reads from it. A journal may hold anything; a fold must not stumble. */

type Check = (value: unknown) => boolean;

/** Beyond whole numbers that a float64 can tell apart nothing is an instant, a speed or a time. */
const LARGEST = Number.MAX_SAFE_INTEGER;
const number: Check = (v) => typeof v === 'number' && v <= LARGEST && v >= -LARGEST;
/** A whole number from 0 to 2^32 − 1. */
const counter: Check = (v) => typeof v === 'number' && v >>> 0 === v;
const text: Check = (v) => typeof v === 'string';
const numberOrNull: Check = (v) => v === null || number(v);
const textOrNull: Check = (v) => v === null || text(v);
const oneOf =
  (...values: readonly string[]): Check =>
  (v) =>
    values.includes(v as string);
const printed: Check = (v) =>
  typeof v === 'object' && v !== null && text((v as { text?: unknown }).text) && text((v as { unit?: unknown }).unit);

const FIELDS: { readonly [T in Observation['type']]: Readonly<Record<string, Check>> } = {
  'pulse.v1': { channel: number, count: counter, boxUs: counter },
  'button.v1': { button: number, presses: counter },
  'pps.v1': { boxUs: counter },
  'fix.v1': { via: oneOf('nmea', 'geolocation'), lat: numberOrNull, lon: numberOrNull, speed: numberOrNull },
  'sensor-gained.v1': { sensor: text },
  'sensor-lost.v1': { sensor: text },
  'epoch.v1': { mono: number, wall: number, bridgedBy: text, uncertaintyMs: number },
  'clock.v1': { source: oneOf('exchange', 'nmea', 'pps', 'tap', 'wall'), officialMs: number, uncertaintyMs: number },
  'clock-pair.v1': { mono: number, wall: number },
  'tap.v1': { input: oneOf('glass', 'wired'), checkpoint: textOrNull },
  'tap-voided.v1': { tap: number },
  'tap-moved.v1': { tap: number, checkpoint: text },
  'tap-accepted.v1': { tap: number },
  'checkpoint-skipped.v1': { checkpoint: text },
  'start-marked.v1': {},
  'release-set.v1': { releaseMs: number },
  'target-set.v1': { targetTimeMs: number },
  'staged-set.v1': { behindM: number },
  'limit-set.v1': { zone: text, from: printed, to: printed, limit: printed },
  'line-moved.v1': { checkpoint: text, to: printed },
  'run-stopped.v1': {},
  'run-resumed.v1': { as: oneOf('racing', 'escort') },
  'run-ended.v1': { outcome: oneOf('finished', 'rerun', 'void', 'retired') },
  'finish-shown.v1': { engine: text, elapsedMs: number, timeErrorMs: number },
  'note.v1': {},
};

const isSoundPulse = (o: PulseV1): boolean => number(o.at) && number(o.channel) && counter(o.count) && counter(o.boxUs);

/** known: may be stepped. unknown: a type this engine has never heard of. unsound: known, but its content makes no sense. */
export function soundness(o: Observation | UnknownObservation): 'known' | 'unknown' | 'unsound' {
  // nearly all observations are pulses
  if (o.type === 'pulse.v1') return isSoundPulse(o as PulseV1) ? 'known' : 'unsound';
  if (!Object.hasOwn(FIELDS, o.type)) return 'unknown';
  if (!number(o.at)) return 'unsound';
  const fields = FIELDS[o.type as Observation['type']];
  for (const name in fields) if (!(fields[name] as Check)((o as unknown as Record<string, unknown>)[name])) return 'unsound';
  return 'known';
}
