import type { PrintedDistance, PrintedSpeed } from '#shared/course/course-book.ts';
import type { Observation } from './observation.ts';

/**
 * The published shape of every observation as data, held to the types by the compiler: it judges what is read, and its digest
 * is what the schema guard pins. A change here is a change of the journal: raise the version of the type instead.
 */

type KindOf<T> = [T] extends [PrintedDistance]
  ? 'printed distance'
  : [T] extends [PrintedSpeed]
    ? 'printed speed'
    : [T] extends [number]
      ? 'integer' | 'number'
      : [T] extends [number | null]
        ? 'number or null'
        : [T] extends [string]
          ? string extends T
            ? 'text'
            : { readonly [Member in T]: true }
          : 'text or null';

type FieldsOf<O> = { readonly [K in Exclude<keyof O, 'seq' | 'at' | 'type'>]: KindOf<O[K]> };
type Table = { readonly [T in Observation['type']]: FieldsOf<Extract<Observation, { readonly type: T }>> };

const SENSOR = { serial: true, geolocation: true, simulator: true } as const;
const BRIDGE = { first: true, box: true, pps: true, gnss: true, page: true, wall: true } as const;

export const OBSERVATION_FIELDS: Table = {
  'pulse.v1': { channel: 'integer', count: 'integer', boxUs: 'integer' },
  'button.v1': { button: 'integer', presses: 'integer', boxUs: 'integer' },
  'pps.v1': { boxUs: 'integer' },
  'fix.v1': {
    via: { nmea: true, geolocation: true },
    lat: 'number or null',
    lon: 'number or null',
    speed: 'number or null',
    course: 'number or null',
    accuracy: 'number or null',
    utcMs: 'number or null',
  },
  'sensor-gained.v1': { sensor: SENSOR, detail: 'text' },
  'sensor-lost.v1': { sensor: SENSOR, detail: 'text' },
  'epoch.v1': { n: 'integer', mono: 'number', wall: 'number', bridgedBy: BRIDGE, uncertaintyMs: 'number' },
  'clock.v1': {
    source: { exchange: true, nmea: true, pps: true, tap: true, wall: true },
    officialMs: 'number',
    uncertaintyMs: 'number',
  },
  'clock-pair.v1': { mono: 'number', wall: 'number' },
  'tap.v1': { input: { glass: true, wired: true }, checkpoint: 'text or null' },
  'tap-voided.v1': { tap: 'integer' },
  'tap-moved.v1': { tap: 'integer', checkpoint: 'text' },
  'tap-accepted.v1': { tap: 'integer' },
  'checkpoint-skipped.v1': { checkpoint: 'text' },
  'start-marked.v1': {},
  'release-set.v1': { releaseMs: 'number' },
  'target-set.v1': { targetTimeMs: 'number' },
  'staged-set.v1': { behindM: 'number' },
  'limit-set.v1': { zone: 'text', from: 'printed distance', to: 'printed distance', limit: 'printed speed' },
  'line-moved.v1': { checkpoint: 'text', to: 'printed distance' },
  'run-stopped.v1': {},
  'run-resumed.v1': { as: { racing: true, escort: true } },
  'run-ended.v1': { outcome: { finished: true, rerun: true, void: true, retired: true } },
  'finish-shown.v1': { engine: 'text', elapsedMs: 'number', timeErrorMs: 'number', sigmaMs: 'number' },
  'note.v1': { text: 'text' },
};

export type FieldKind = string | Readonly<Record<string, true>>;

/** @returns The name of the first field that is missing or of another kind, or null where all are as published. Extra fields pass. */
export function wrongField(raw: Readonly<Record<string, unknown>>, fields: Readonly<Record<string, FieldKind>>): string | null {
  for (const name in fields) {
    if (!isOfKind(raw[name], fields[name] as FieldKind)) return name;
  }
  return null;
}

function isOfKind(value: unknown, kind: FieldKind): boolean {
  if (typeof kind !== 'string') return typeof value === 'string' && Object.hasOwn(kind, value);
  if (kind === 'integer') return Number.isSafeInteger(value);
  if (kind === 'number') return Number.isFinite(value);
  if (kind === 'number or null') return value === null || Number.isFinite(value);
  if (kind === 'text') return typeof value === 'string';
  if (kind === 'text or null') return value === null || typeof value === 'string';
  return isPrinted(value, kind === 'printed distance' ? ['km', 'mi'] : ['km/h', 'mph']);
}

function isPrinted(value: unknown, units: readonly string[]): boolean {
  if (typeof value !== 'object' || value === null) return false;
  const { text, unit } = value as { readonly text?: unknown; readonly unit?: unknown };
  return typeof text === 'string' && typeof unit === 'string' && units.includes(unit);
}
