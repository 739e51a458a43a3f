import { checkBlock } from '#shared/journal/block.ts';
import { fail, ok, type Result } from '#shared/result.ts';

/**
 * Whole blocks, one after the other, whose seqs follow from `firstSeq`. Judged by frame and checksum alone: what the blocks
 * hold need not be understood to be kept.
 */
export function readFrames(bytes: Uint8Array, firstSeq: number): Result<{ readonly count: number }, string> {
  let offset = 0;
  let seq = firstSeq;
  while (offset < bytes.length) {
    const block = checkBlock(bytes, offset);
    if (!block.ok) return fail(block.error.message);
    if (block.value.firstSeq !== seq)
      return fail(`Block at byte ${offset} begins with observation ${block.value.firstSeq}; ${seq} follows.`);
    seq += block.value.count;
    offset = block.value.nextOffset;
  }
  return seq === firstSeq ? fail('The chunk is empty.') : ok({ count: seq - firstSeq });
}
