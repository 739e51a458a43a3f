import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { utf8Decode, utf8Encode } from '#shared/journal/utf8.ts';

const anyText = fc.oneof(
  fc.string({ unit: 'grapheme' }),
  fc.string({ unit: 'binary' }),
  fc.string({ unit: 'binary-ascii', maxLength: 5000 }),
);

describe('UTF-8, against the encoder and decoder of the platform', () => {
  it('writes the same bytes, lone surrogates included', () => {
    fc.assert(fc.property(anyText, (text) => void expect([...utf8Encode(text)]).toEqual([...new TextEncoder().encode(text)])));
    expect([...utf8Encode('a\ud800b\udc00')]).toEqual([...new TextEncoder().encode('a\ud800b\udc00')]);
  });

  it('reads the same text, and refuses what the platform refuses', () => {
    const strict = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true });
    const theirs = (bytes: Uint8Array): string | null => {
      try {
        return strict.decode(bytes);
      } catch {
        return null;
      }
    };
    const bytes = fc.oneof(
      fc.uint8Array({ maxLength: 12 }),
      fc.array(fc.constantFrom(0x41, 0x80, 0xbf, 0xc0, 0xc2, 0xe0, 0xa0, 0xed, 0x9f, 0xef, 0xf0, 0x90, 0xf4, 0x8f, 0xf5), { maxLength: 9 }),
      anyText.map((text) => new TextEncoder().encode(text)),
    );
    fc.assert(
      fc.property(bytes, (some) => void expect(utf8Decode(Uint8Array.from(some), 0, some.length)).toBe(theirs(Uint8Array.from(some)))),
      { numRuns: 3000 },
    );
  });
});
