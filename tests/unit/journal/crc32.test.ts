import { crc32 as zlibCrc32 } from 'node:zlib';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { crc32 } from '#shared/journal/crc32.ts';

describe('crc32', () => {
  it('has the check value of the standard CRC-32 (ITU-T V.42, IEEE 802.3)', () => {
    expect(crc32(new TextEncoder().encode('123456789')).toString(16)).toBe('cbf43926');
  });

  it('agrees with zlib on any bytes and any part of them', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 300 }), fc.nat(50), fc.nat(50), (bytes, skip, drop) => {
        const from = Math.min(skip, bytes.length);
        const to = Math.max(from, bytes.length - drop);
        expect(crc32(bytes, from, to)).toBe(zlibCrc32(bytes.subarray(from, to)));
      }),
    );
  });
});
