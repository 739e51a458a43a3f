// @vitest-environment node
import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bytesOfCut, CHUNK_LIMIT_BYTES, cutChunks } from '#src/sync/chunk-cutter.ts';
import { chainDigest, FIRST_DIGEST, subtleSha256 } from '#src/sync/digest-chain.ts';
import { bytesOfBlocks, sampleBlocks } from './sample-runs.ts';
import { createWorld } from './simulated-world.ts';

describe('chunk cutter', () => {
  it('cuts whole blocks, in order, nothing left over, none above the limit', () => {
    fc.assert(
      fc.property(fc.integer(), fc.integer({ min: 0, max: 60 }), fc.integer({ min: 230, max: 5000 }), (seed, count, limit) => {
        const blocks = sampleBlocks(count, createWorld(seed).random);
        const cuts = cutChunks(blocks, 0, limit);
        if (!cuts.ok) throw new Error(cuts.error.message);
        const pieces = cuts.value.map((cut) => {
          const bytes = bytesOfCut(blocks, cut);
          if (!bytes.ok) throw new Error(bytes.error.message);
          expect(bytes.value.byteLength).toBeLessThanOrEqual(limit);
          expect(blocks.some((block) => block.firstSeq === cut.firstSeq)).toBe(true);
          return Buffer.from(bytes.value);
        });
        expect(Buffer.concat(pieces).equals(bytesOfBlocks(blocks))).toBe(true);
      }),
    );
  });

  it('lets a block above the limit stand alone', () => {
    const big = { firstSeq: 1, count: 1, bytes: new Uint8Array(CHUNK_LIMIT_BYTES + 1) };
    const cuts = cutChunks(
      [{ firstSeq: 0, count: 1, bytes: new Uint8Array(10) }, big, { firstSeq: 2, count: 1, bytes: new Uint8Array(10) }],
      0,
    );
    expect(cuts.ok && cuts.value.map((cut) => cut.length)).toEqual([10, CHUNK_LIMIT_BYTES + 1, 10]);
  });

  it('refuses a journal with a hole', () => {
    const cuts = cutChunks(
      [
        { firstSeq: 0, count: 2, bytes: new Uint8Array(1) },
        { firstSeq: 3, count: 1, bytes: new Uint8Array(1) },
      ],
      0,
    );
    expect(!cuts.ok && cuts.error.code).toBe('JOURNAL_DAMAGED');
  });
});

describe('digest chain', () => {
  it('is SHA-256 over the previous digest and the bytes', async () => {
    const first = await chainDigest(FIRST_DIGEST, new Uint8Array([1, 2, 3]), subtleSha256);
    const second = await chainDigest(first, new Uint8Array([4]), subtleSha256);
    const byNode = (previous: string, bytes: number[]) =>
      createHash('sha256').update(Buffer.from(previous, 'hex')).update(Buffer.from(bytes)).digest('hex');
    expect(first).toBe(byNode('0'.repeat(64), [1, 2, 3]));
    expect(second).toBe(byNode(first, [4]));
  });
});
