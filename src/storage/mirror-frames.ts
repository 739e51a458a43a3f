import { checkBlock } from '#shared/journal/block.ts';
import { readU32 } from '#shared/journal/byte-reader.ts';
import { crc32 } from '#shared/journal/crc32.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { utf8Decode, utf8Encode } from '#shared/journal/utf8.ts';
import type { KeptChunk } from './chunk-store.ts';
import type { StoredBlock } from './stored-block.ts';

/**
 * The mirror of one run: frames one behind the other, each length, CRC-32 of the payload (both little-endian, 4 bytes) and
 * payload. The first payload is the header as JSON; the rest are blocks as they are, and chunks as they were cut, as JSON.
 */

const FRAME_HEAD = 8;
const BLOCK_MARK = 0x45;

export interface MirrorContent {
  /** Null for an empty file or one whose very first frame is damaged. */
  readonly header: RunHeader | null;
  readonly blocks: readonly StoredBlock[];
  readonly chunks: readonly KeptChunk[];
  /** Everything before this is sound; what lies behind was torn or damaged. */
  readonly soundBytes: number;
}

export const headerFrame = (header: RunHeader): Uint8Array => frame(utf8Encode(JSON.stringify({ header })));
export const chunkFrame = (chunk: KeptChunk): Uint8Array => frame(utf8Encode(JSON.stringify({ chunk })));
export const blockFrame = (block: StoredBlock): Uint8Array => frame(block.bytes);

function frame(payload: Uint8Array): Uint8Array {
  const bytes = new Uint8Array(FRAME_HEAD + payload.byteLength);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, payload.byteLength, true);
  view.setUint32(4, crc32(payload), true);
  bytes.set(payload, FRAME_HEAD);
  return bytes;
}

/** Reads as far as everything is sound and follows on; never throws. */
export function readMirror(bytes: Uint8Array): MirrorContent {
  const blocks: StoredBlock[] = [];
  const chunks: KeptChunk[] = [];
  let header: RunHeader | null = null;
  let at = 0;
  for (let payload = payloadAt(bytes, at); payload !== null; payload = payloadAt(bytes, at)) {
    if (payload[0] === BLOCK_MARK) {
      const block = blockIn(payload);
      const last = blocks.at(-1);
      const expected = last === undefined ? 0 : last.firstSeq + last.count;
      if (header === null || block === null || block.firstSeq !== expected) break;
      blocks.push(block);
    } else {
      const note = noteIn(payload);
      if (note === null || (header === null) !== (note.header !== undefined)) break;
      header = note.header ?? header;
      if (note.chunk !== undefined) chunks.push(note.chunk);
    }
    at += FRAME_HEAD + payload.byteLength;
  }
  return { header, blocks, chunks, soundBytes: at };
}

function payloadAt(bytes: Uint8Array, at: number): Uint8Array | null {
  if (bytes.byteLength - at <= FRAME_HEAD) return null;
  const from = at + FRAME_HEAD;
  const to = from + readU32(bytes, at);
  if (to > bytes.byteLength || to === from || crc32(bytes, from, to) !== readU32(bytes, at + 4)) return null;
  return bytes.subarray(from, to);
}

function blockIn(payload: Uint8Array): StoredBlock | null {
  const head = checkBlock(payload);
  if (!head.ok || head.value.nextOffset !== payload.byteLength) return null;
  // A copy: a view would keep, and send between threads, the whole file.
  return { firstSeq: head.value.firstSeq, count: head.value.count, bytes: payload.slice() };
}

function noteIn(payload: Uint8Array): { readonly header?: RunHeader; readonly chunk?: KeptChunk } | null {
  const text = utf8Decode(payload, 0, payload.byteLength);
  if (text === null) return null;
  try {
    // Sound by its checksum, so it is what this file wrote.
    return JSON.parse(text);
  } catch {
    return null;
  }
}
