import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decodeBlock, encodeBlock } from '#shared/journal/block.ts';
import { OBSERVATION_FIELDS } from '#shared/journal/observation-fields.ts';
import { type RawObservation, upcast, upcastWith, VOCABULARY, type Vocabulary, versionOf } from '#shared/journal/upcast.ts';
import { journal } from './arbitrary-observations.ts';

/** An invented history: lamps counted once, then named, then named with a colour. */
const lamps: Vocabulary = {
  fields: { 'lamp.v3': { name: 'text', colour: 'text' } },
  upgrades: {
    'lamp.v1': ({ seq, at, number }) => ({ seq, at, type: 'lamp.v2', name: `lamp ${String(number)}` }),
    'lamp.v2': ({ seq, at, ...rest }) => ({ ...rest, seq, at, type: 'lamp.v3', colour: 'white' }),
  },
};

describe('upcast', () => {
  it('carries an old shape up through every numbered version', () => {
    const old: RawObservation = { seq: 4, at: 9, type: 'lamp.v1', number: 2 };
    expect(upcastWith(lamps, old)).toEqual({ seq: 4, at: 9, type: 'lamp.v3', name: 'lamp 2', colour: 'white' });
  });

  it('keeps unknown and newer types as they came', () => {
    for (const type of ['tyre-heat.v1', 'pulse.v2', 'toString', '']) {
      const raw: RawObservation = { seq: 1, at: 2, type, x: [1, { y: null }] };
      expect(upcast(raw)).toEqual(raw);
    }
  });

  it('leaves published shapes alone, extra fields included', () => {
    fc.assert(fc.property(journal(0, { minLength: 1, maxLength: 1 }), ([o]) => void expect(upcast(o as RawObservation)).toEqual(o)));
    const extra: RawObservation = { seq: 0, at: 0, type: 'note.v1', text: 'x', by: 'D' };
    expect(upcast(extra)).toEqual(extra);
  });

  it('sets a known type with a wrong field aside whole, so that the engine never sees it', () => {
    for (const [type, fields] of Object.entries(OBSERVATION_FIELDS)) {
      for (const field of Object.keys(fields)) {
        const raw: RawObservation = { seq: 0, at: 1, ...sound(type), type, [field]: { not: 'this' } };
        expect(upcast(raw), `${type} ${field}`).toEqual({ seq: 0, at: 1, type: 'malformed', field, was: raw });
      }
    }
  });

  it('keeps what was set aside through another writing and reading', () => {
    const raw = { seq: 0, at: 1, type: 'tap-voided.v1', tap: 'three' } as const;
    const aside = upcast(raw);
    expect(decodeBlock(encodeBlock(0, [aside]))).toMatchObject({ ok: true, value: { observations: [aside] } });
  });

  it('has upgrades that each raise the version by one and end at a published shape', () => {
    for (const type of Object.keys(VOCABULARY.upgrades)) {
      const [name] = type.split('.v');
      expect(Object.keys(VOCABULARY.fields).some((known) => known.startsWith(`${name}.v`) && versionOf(known) > versionOf(type))).toBe(
        true,
      );
    }
    const endless: Vocabulary = { fields: {}, upgrades: { 'lamp.v1': (old) => old } };
    expect(() => upcastWith(endless, { seq: 0, at: 0, type: 'lamp.v1' })).toThrow(RangeError);
  });
});

const SOUND_KINDS: Readonly<Record<string, unknown>> = {
  integer: 1,
  number: 1.5,
  'number or null': null,
  text: 't',
  'text or null': null,
  'printed distance': { text: '1.0', unit: 'km' },
  'printed speed': { text: '50', unit: 'mph' },
};

function sound(type: string): Record<string, unknown> {
  const fields = OBSERVATION_FIELDS[type as keyof typeof OBSERVATION_FIELDS];
  return Object.fromEntries(
    Object.entries(fields).map(([name, kind]) => [name, typeof kind === 'string' ? SOUND_KINDS[kind] : Object.keys(kind)[0]]),
  );
}
