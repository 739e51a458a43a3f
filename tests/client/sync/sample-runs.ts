import type { Pack } from '#shared/course/pack.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';

/** A header as far as the outbox reads one: it asks the class's aids, the rest travels unread. */
export function sampleHeader(runId: string, dataLink = false): RunHeader {
  const pack = { raceClass: { aids: { wheel: true, gnssSpeed: false, gnssPosition: false, dataLink } } } as unknown as Pack;
  return {
    format: 'evenline-journal',
    version: 1,
    runId,
    deviceId: 'tablet',
    entryId: 'entry',
    attemptId: 'attempt',
    packDigest: 'a'.repeat(64),
    pack,
    clockRate: 1,
    practice: false,
    createdMs: 1_780_000_000_000,
    appVersion: '0.1.0',
  };
}

/** Blocks of a journal by size alone: what is in them is none of the outbox's business. */
export function sampleBlocks(count: number, random: () => number, largest = 200): StoredBlock[] {
  const blocks: StoredBlock[] = [];
  let seq = 0;
  for (let i = 0; i < count; i++) {
    const observations = 1 + Math.floor(random() * 20);
    const bytes = new Uint8Array(20 + Math.floor(random() * largest));
    for (let b = 0; b < bytes.length; b++) bytes[b] = Math.floor(random() * 256);
    blocks.push({ firstSeq: seq, count: observations, bytes });
    seq += observations;
  }
  return blocks;
}

export const bytesOfBlocks = (blocks: readonly StoredBlock[]): Buffer => Buffer.concat(blocks.map((block) => block.bytes));
