import type { Observation, UnknownObservation } from './observation.ts';
import { type FieldKind, OBSERVATION_FIELDS, wrongField } from './observation-fields.ts';

/**
 * Old shapes become today's on reading; journals are never rewritten. A type this build does not know is kept as it came, so
 * that the result can say it needs a newer Evenline. A known type with a wrong field is set aside whole as `malformed`.
 */

export interface RawObservation {
  readonly seq: number;
  readonly at: number;
  readonly type: string;
  readonly [key: string]: unknown;
}

/** From one numbered version to the next: `pulse.v1` -> `pulse.v2`. Never skips a number. */
export type Upgrade = (old: RawObservation) => RawObservation;

export interface Vocabulary {
  readonly fields: Readonly<Record<string, Readonly<Record<string, FieldKind>>>>;
  /** Keyed by the type that is upgraded. */
  readonly upgrades: Readonly<Record<string, Upgrade>>;
}

export const VOCABULARY: Vocabulary = { fields: OBSERVATION_FIELDS, upgrades: {} };

export const MALFORMED = 'malformed';

/** Today's shape of `raw`. Total: whatever cannot be understood comes back as an `UnknownObservation`. */
export function upcast(raw: RawObservation): Observation | UnknownObservation {
  return upcastWith(VOCABULARY, raw);
}

/** `upcast` over another vocabulary; an upgrade that names itself again would never end and throws a RangeError. */
export function upcastWith(vocabulary: Vocabulary, raw: RawObservation): Observation | UnknownObservation {
  let now = raw;
  for (let upgrade = own(vocabulary.upgrades, now.type); upgrade !== undefined; upgrade = own(vocabulary.upgrades, now.type)) {
    const next = upgrade(now);
    if (versionOf(next.type) <= versionOf(now.type)) throw new RangeError(`the upgrade of ${now.type} does not raise its version`);
    now = next;
  }
  const fields = own(vocabulary.fields, now.type);
  if (fields === undefined) return now;
  const wrong = wrongField(now, fields);
  // Set aside under another name, because the engine trusts the fields of the types it knows.
  return wrong === null ? (now as Observation) : { seq: raw.seq, at: raw.at, type: MALFORMED, field: wrong, was: raw };
}

/** 3 for `tap.v3`; 0 where a type carries no version. */
export function versionOf(type: string): number {
  return Number(/\.v(\d+)$/.exec(type)?.[1] ?? 0);
}

function own<T>(table: Readonly<Record<string, T>>, key: string): T | undefined {
  return Object.hasOwn(table, key) ? table[key] : undefined;
}
