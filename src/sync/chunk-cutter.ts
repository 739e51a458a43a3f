import { fail, ok, type Result } from '#shared/result.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';

/** Whole blocks up to this many bytes make a chunk. */
export const CHUNK_LIMIT_BYTES = 256 * 1024;

/** A piece of a journal: blocks with firstSeq <= seq < nextSeq, `length` bytes together. */
export interface Cut {
  readonly firstSeq: number;
  readonly nextSeq: number;
  readonly length: number;
}

export interface SequenceBreak {
  readonly code: 'JOURNAL_DAMAGED';
  readonly message: string;
}

/**
 * Cuts the blocks from `fromSeq` on into chunks, in order, nothing left over. A block is never divided: one above the
 * limit stands alone. Cuts are made once and kept, so that every repetition sends the same bytes.
 */
export function cutChunks(
  blocks: readonly StoredBlock[],
  fromSeq: number,
  limit = CHUNK_LIMIT_BYTES,
): Result<readonly Cut[], SequenceBreak> {
  const cuts: Cut[] = [];
  let expected = fromSeq;
  for (const block of blocks) {
    if (block.firstSeq < fromSeq) continue;
    if (block.firstSeq !== expected) return fail(broken(expected, block.firstSeq));
    expected = block.firstSeq + block.count;
    const open = cuts.at(-1);
    const size = block.bytes.byteLength;
    if (open === undefined || open.length + size > limit) cuts.push({ firstSeq: block.firstSeq, nextSeq: expected, length: size });
    else cuts[cuts.length - 1] = { ...open, nextSeq: expected, length: open.length + size };
  }
  return ok(cuts);
}

/** The bytes of one cut, exactly as the blocks hold them. */
export function bytesOfCut(blocks: readonly StoredBlock[], cut: Cut): Result<Uint8Array<ArrayBuffer>, SequenceBreak> {
  const bytes = new Uint8Array(cut.length);
  let offset = 0;
  let expected = cut.firstSeq;
  for (const block of blocks) {
    if (block.firstSeq < cut.firstSeq || block.firstSeq >= cut.nextSeq) continue;
    if (block.firstSeq !== expected || offset + block.bytes.byteLength > cut.length) return fail(broken(expected, block.firstSeq));
    bytes.set(block.bytes, offset);
    offset += block.bytes.byteLength;
    expected = block.firstSeq + block.count;
  }
  return offset === cut.length && expected === cut.nextSeq ? ok(bytes) : fail(broken(expected, cut.nextSeq));
}

function broken(expected: number, found: number): SequenceBreak {
  return { code: 'JOURNAL_DAMAGED', message: `The journal on this device breaks off at observation ${expected} (next is ${found}).` };
}
