import { fail, ok, type Result } from '#shared/result.ts';
import { type BlockFault, blockFault } from './block-fault.ts';
import { ByteReader, readU32 } from './byte-reader.ts';
import { ByteWriter } from './byte-writer.ts';
import { crc32 } from './crc32.ts';
import { JSON_TAG, readJsonRecord, writeJsonRecord } from './json-records.ts';
import type { Observation, UnknownObservation } from './observation.ts';
import { createPulseEncoder, PulseDecoder } from './pulse-records.ts';

/**
 * A block: the row of the database, the frame of the mirror, the unit of upload. Layout in FORMAT.md.
 * Knows nothing of what observations mean.
 */

export const BLOCK_FORMAT = 1;
const MAGIC_0 = 0x45;
const MAGIC_1 = 0x42;
const HEADER_BYTES = 16;
const CRC_BYTES = 4;

export type Journalled = Observation | UnknownObservation;

export interface BlockHead {
  readonly firstSeq: number;
  readonly count: number;
  /** Offset just behind this block. */
  readonly nextOffset: number;
}
export interface Block extends BlockHead {
  readonly observations: readonly Journalled[];
}
/** The fault, and everything that was sound before it. */
export interface BlocksFault extends BlockFault {
  readonly blocks: readonly Block[];
}

/**
 * Bytes of one block. The seqs follow from `firstSeq`; those inside the observations must agree with it.
 * @throws RangeError for no observations, or for a seq that does not follow: both are bugs of the caller.
 */
export function encodeBlock(firstSeq: number, observations: readonly Journalled[]): Uint8Array {
  if (observations.length === 0) throw new RangeError('a block holds at least one observation');
  const out = new ByteWriter();
  for (const byte of [MAGIC_0, MAGIC_1, BLOCK_FORMAT, 0]) out.byte(byte);
  out.u32(0);
  out.u32(firstSeq);
  out.u32(observations.length);
  const pulses = createPulseEncoder(out);
  observations.forEach((observation, i) => {
    if (observation.seq !== firstSeq + i) throw new RangeError(`seq ${observation.seq} where ${firstSeq + i} follows`);
    if (!pulses.write(observation)) writeJsonRecord(out, observation);
  });
  out.putU32(4, out.length + CRC_BYTES);
  out.u32(crc32(out.view()));
  return out.view().slice();
}

/**
 * Judges the block at `offset` by its frame and checksum alone, without understanding what is in it: the frame is the same in
 * every block format, so that an older Evenline can keep and send what it cannot read. Never throws.
 */
export function checkBlock(bytes: Uint8Array, offset = 0): Result<BlockHead, BlockFault> {
  const left = bytes.length - offset;
  if (left < HEADER_BYTES) {
    return fail(blockFault('torn-tail', offset, null, `${left} bytes are left where a block has at least ${HEADER_BYTES + CRC_BYTES}`));
  }
  if (bytes[offset] !== MAGIC_0 || bytes[offset + 1] !== MAGIC_1)
    return fail(blockFault('not-a-block', offset, null, 'the mark EB is missing'));
  const length = readU32(bytes, offset + 4);
  const seq = readU32(bytes, offset + 8);
  const count = readU32(bytes, offset + 12);
  if (length < HEADER_BYTES + CRC_BYTES || count === 0) {
    return fail(blockFault('not-a-block', offset, null, `${count} observations in ${length} bytes`));
  }
  if (length > left) return fail(blockFault('torn-tail', offset, seq, `${left} of ${length} bytes are there`));
  const end = offset + length;
  if (crc32(bytes, offset, end - CRC_BYTES) !== readU32(bytes, end - CRC_BYTES)) {
    return fail(blockFault('bad-checksum', offset, seq, `the block from observation ${seq} does not match its checksum`));
  }
  return ok({ firstSeq: seq, count, nextOffset: end });
}

/** One block from `offset` on. Never throws; what it cannot read is a fault that says where. */
export function decodeBlock(bytes: Uint8Array, offset = 0): Result<Block, BlockFault> {
  const head = checkBlock(bytes, offset);
  if (!head.ok) return head;
  const { firstSeq, count, nextOffset } = head.value;
  const format = bytes[offset + 2];
  if (format !== BLOCK_FORMAT) return fail(blockFault('newer-format', offset, firstSeq, `block format ${String(format)}`));
  const reader = new ByteReader(bytes, offset + HEADER_BYTES, nextOffset - CRC_BYTES);
  const pulses = new PulseDecoder();
  const observations: Journalled[] = [];
  while (observations.length < count) {
    pulses.readRun(reader, firstSeq + observations.length, firstSeq + count, observations);
    if (observations.length === count) break;
    const seq = firstSeq + observations.length;
    const tag = reader.byte();
    const observation = tag === JSON_TAG ? readJsonRecord(bytes, reader, seq) : null;
    if (observation === null || reader.short) {
      return fail(blockFault('bad-record', offset, seq, `observation ${seq} (record kind ${tag}) cannot be read`));
    }
    observations.push(observation);
  }
  if (!reader.done) return fail(blockFault('bad-record', offset, firstSeq, `more bytes than ${count} observations`));
  return ok({ firstSeq, count, observations, nextOffset });
}

/** Blocks one behind the other to the end of `bytes`, without a gap in seq. A fault carries the sound blocks before it. */
export function decodeBlocks(bytes: Uint8Array): Result<readonly Block[], BlocksFault> {
  const blocks: Block[] = [];
  let expected: number | null = null;
  for (let offset = 0; offset < bytes.length; ) {
    const block = decodeBlock(bytes, offset);
    if (!block.ok) return fail({ ...block.error, blocks });
    const { firstSeq, count, nextOffset } = block.value;
    if (expected !== null && firstSeq !== expected) {
      return fail({ ...blockFault('sequence-gap', offset, firstSeq, `observation ${firstSeq} where ${expected} follows`), blocks });
    }
    blocks.push(block.value);
    expected = firstSeq + count;
    offset = nextOffset;
  }
  return ok(blocks);
}
