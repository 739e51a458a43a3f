import fc from 'fast-check';
import type { Journalled } from '#shared/journal/block.ts';
import { type FieldKind, OBSERVATION_FIELDS } from '#shared/journal/observation-fields.ts';

/** Observations of every published type, and of types nobody published, straight from the table of fields. */

const finite = fc.double({ noNaN: true, noDefaultInfinity: true }).map((x) => (x === 0 ? 0 : x));
const text = fc.string({ unit: 'grapheme' });
const u32 = fc.integer({ min: 0, max: 2 ** 32 - 1 });

function ofKind(kind: FieldKind): fc.Arbitrary<unknown> {
  if (typeof kind !== 'string') return fc.constantFrom(...Object.keys(kind));
  if (kind === 'integer') return fc.oneof(u32, fc.integer({ min: 0, max: 127 }));
  if (kind === 'number') return finite;
  if (kind === 'number or null') return fc.option(finite);
  if (kind === 'text') return text;
  if (kind === 'text or null') return fc.option(text);
  return fc.record({ text, unit: fc.constantFrom(...(kind === 'printed distance' ? ['km', 'mi'] : ['km/h', 'mph'])) });
}

const known = Object.entries(OBSERVATION_FIELDS).map(([type, fields]) =>
  fc
    .record(Object.fromEntries(Object.entries(fields).map(([name, kind]) => [name, ofKind(kind as FieldKind)])))
    .map((rest) => ({ ...rest, type })),
);
const unknown = fc
  .record({ type: fc.constantFrom('tyre-heat.v1', 'pulse.v9', 'constructor', ''), load: fc.jsonValue() })
  .map((o) => JSON.parse(JSON.stringify(o)) as typeof o);
/** Steady pulses as a car makes them, so that the binary records are the rule and not the exception. */
const pulse = fc.record({ type: fc.constant('pulse.v1'), channel: fc.integer({ min: 0, max: 3 }), count: u32, boxUs: u32 });

export const at = fc.oneof(fc.integer({ min: 0, max: 4 * 3600e6 }), fc.maxSafeInteger());
const body = fc.oneof(...known, unknown, pulse, pulse);

/** @param firstSeq The seq of the first; the rest follow. */
export function journal(firstSeq: number, constraints: { minLength?: number; maxLength?: number }): fc.Arbitrary<Journalled[]> {
  return fc
    .array(fc.tuple(at, body), constraints)
    .map((all) => all.map(([instant, rest], i) => ({ ...rest, seq: firstSeq + i, at: instant }) as Journalled));
}
