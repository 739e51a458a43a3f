import { crc32 as zlibCrc32 } from 'node:zlib';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkBlock, decodeBlock, decodeBlocks, encodeBlock, type Journalled } from '#shared/journal/block.ts';
import { journal } from './arbitrary-observations.ts';

/** By hand from FORMAT.md: the code under test had no part in it. */
function blockByHand(firstSeq: number, count: number, records: readonly number[], format = 1): Uint8Array {
  const bytes = Buffer.alloc(16 + records.length + 4);
  bytes.set([0x45, 0x42, format, 0]);
  bytes.writeUInt32LE(bytes.length, 4);
  bytes.writeUInt32LE(firstSeq, 8);
  bytes.writeUInt32LE(count, 12);
  bytes.set(records, 16);
  bytes.writeUInt32LE(zlibCrc32(bytes.subarray(0, -4)), bytes.length - 4);
  return Uint8Array.from(bytes);
}

function joined(parts: readonly Uint8Array[]): Uint8Array {
  return Uint8Array.from(parts.flatMap((part) => [...part]));
}

describe('a block, byte by byte as FORMAT.md has it', () => {
  const two: readonly Journalled[] = [
    { seq: 300, at: 1000, type: 'pulse.v1', channel: 2, count: 5, boxUs: 990 },
    { seq: 301, at: 900, type: 'pulse.v1', channel: 2, count: 4, boxUs: 891 },
  ];
  // at +1000 -> zigzag 2000 = D0 0F; box 990 - 1000 = -10 -> 19 = 13; count +5 -> 10.
  // at -100 -> 199 = C7 01; box step -99 less -100 = +1 -> 2; count -1 -> 1.
  const records = [0x82, 0xd0, 0x0f, 0x13, 0x0a, 0x82, 0xc7, 0x01, 0x02, 0x01];

  it('writes pulses as steps', () => expect([...encodeBlock(300, two)]).toEqual([...blockByHand(300, 2, records)]));

  it('reads them back', () => {
    const block = decodeBlock(blockByHand(300, 2, records));
    expect(block).toEqual({ ok: true, value: { firstSeq: 300, count: 2, observations: two, nextOffset: 30 } });
  });

  it('keeps everything else as JSON without seq', () => {
    const note: Journalled = { seq: 7, at: 5, type: 'note.v1', text: 'ü' };
    const json = [...Buffer.from('{"at":5,"type":"note.v1","text":"ü"}')];
    expect([...encodeBlock(7, [note])]).toEqual([...blockByHand(7, 1, [0x01, json.length, ...json])]);
  });

  it('carries counters over their wrap at 2^32', () => {
    const wrapping: readonly Journalled[] = [
      { seq: 0, at: 0, type: 'pulse.v1', channel: 0, count: 2 ** 32 - 1, boxUs: 2 ** 32 - 5 },
      { seq: 1, at: 10, type: 'pulse.v1', channel: 0, count: 3, boxUs: 5 },
    ];
    const bytes = encodeBlock(0, wrapping);
    expect(decodeBlock(bytes)).toMatchObject({ ok: true, value: { observations: wrapping } });
    // Both steps over the wrap are small ones: one byte each.
    expect(bytes.length).toBe(16 + (1 + 1 + 1 + 1) + (1 + 1 + 1 + 1) + 4);
  });
});

describe('any journal', () => {
  it('comes back from its blocks as it was', () => {
    fc.assert(
      fc.property(journal(0, { minLength: 1, maxLength: 60 }), fc.integer({ min: 1, max: 20 }), (all, size) => {
        const parts: Uint8Array[] = [];
        for (let i = 0; i < all.length; i += size) parts.push(encodeBlock(i, all.slice(i, i + size)));
        const read = decodeBlocks(joined(parts));
        if (!read.ok) throw new Error(read.error.message);
        expect(read.value.flatMap((block) => block.observations)).toEqual(all);
      }),
    );
  });

  it('refuses to write a seq that does not follow, or nothing at all', () => {
    expect(() => encodeBlock(0, [])).toThrow(RangeError);
    expect(() => encodeBlock(3, [{ seq: 4, at: 0, type: 'start-marked.v1' }])).toThrow(RangeError);
  });
});

describe('damage', () => {
  const blocks = [0, 3, 6].map((first) =>
    encodeBlock(
      first,
      [0, 1, 2].map((i) => ({ seq: first + i, at: (first + i) * 10_000, type: 'pulse.v1', channel: 1, count: first + i, boxUs: first })),
    ),
  );
  const [one, two, three] = blocks as [Uint8Array, Uint8Array, Uint8Array];
  const whole = joined(blocks);

  it('tells a torn tail at every length, and keeps the blocks before it', () => {
    for (let length = 0; length < whole.length; length++) {
      const read = decodeBlocks(whole.subarray(0, length));
      const sound = blocks.filter((_, i) => blocks.slice(0, i + 1).reduce((n, b) => n + b.length, 0) <= length).length;
      const left = length - blocks.slice(0, sound).reduce((n, b) => n + b.length, 0);
      if (left === 0) expect(read).toMatchObject({ ok: true, value: { length: sound } });
      else expect(read).toMatchObject({ ok: false, error: { code: 'torn-tail', offset: length - left, blocks: { length: sound } } });
    }
  });

  it('tells every flipped bit, wherever it is', () => {
    for (let bit = 0; bit < two.length * 8; bit++) {
      const damaged = whole.slice();
      damaged[one.length + (bit >> 3)] = (whole[one.length + (bit >> 3)] as number) ^ (1 << (bit & 7));
      const read = decodeBlocks(damaged);
      expect(read, `bit ${bit}`).toMatchObject({ ok: false, error: { offset: one.length, blocks: { length: 1 } } });
    }
  });

  it('names what is wrong and what to do', () => {
    const at = (bytes: Uint8Array) => {
      const read = decodeBlocks(bytes);
      return read.ok ? null : [read.error.code, read.error.seq, read.error.message];
    };
    expect(at(joined([one, three]))).toEqual(['sequence-gap', 6, expect.stringMatching(/6 where 3 follows.*missing part/)]);
    expect(at(joined([one, one]))).toEqual(['sequence-gap', 0, expect.stringMatching(/0 where 3 follows/)]);
    expect(at(joined([one, new Uint8Array(40)]))).toEqual(['not-a-block', null, expect.stringMatching(/another copy/)]);
    const newer = blockByHand(9, 4, [0xff, 0x00], 2);
    expect(at(newer)).toEqual(['newer-format', 9, expect.stringMatching(/newer Evenline/)]);
    // Kept and sent on all the same.
    expect(checkBlock(newer)).toEqual({ ok: true, value: { firstSeq: 9, count: 4, nextOffset: newer.length } });
    expect(at(blockByHand(9, 1, [0x02, 0x00]))).toEqual(['bad-record', 9, expect.stringMatching(/another copy/)]);
  });

  it('refuses records a sound checksum covers but nobody wrote', () => {
    const hostile: readonly (readonly [number, readonly number[]])[] = [
      [1, [0x01, 0x05, 0x7b, 0x7d]],
      [1, [0x01, 0x02, 0x5b, 0x5d]],
      [1, [0x01, 0x01, 0xff]],
      [2, [0x82, 0x02, 0x02, 0x02]],
      [1, [0x82, 0x02, 0x02, 0x02, 0x82, 0x02, 0x02, 0x02]],
      [1, [0x82, ...Array(12).fill(0xff)]],
      [1, [0x82, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0xff, 0x7f, 0x02, 0x02]],
      [4_000_000_000, [0x82, 0x02, 0x02, 0x02]],
    ];
    for (const [count, records] of hostile) {
      expect(decodeBlock(blockByHand(0, count, records)), String(records)).toMatchObject({ ok: false, error: { code: 'bad-record' } });
    }
  });

  it('never throws, whatever the bytes', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 80 }), fc.integer({ min: -5, max: 100 }), (noise, offset) => {
        expect(decodeBlocks(noise).ok).toBe(noise.length === 0);
        expect(checkBlock(noise, offset).ok).toBe(false);
        const read = decodeBlock(blockByHand(0, 1 + (noise.length % 4), [...noise]));
        if (read.ok) expect(read.value.observations).toHaveLength(1 + (noise.length % 4));
      }),
      { numRuns: 2000 },
    );
  });
});
