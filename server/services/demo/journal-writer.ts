import { CHUNK_TARGET_BYTES } from '#shared/api/runs.ts';
import { encodeBlock } from '#shared/journal/block.ts';
import { isSensorObservation, type NewObservation, type Observation } from '#shared/journal/observation.ts';

/** Numbers observations and packs them into blocks and chunks the way a tablet does: sensors together, each act alone. */
export interface JournalWriter {
  /** What came within one block's time, in order. @returns the same, numbered. */
  add(observations: readonly NewObservation[]): readonly Observation[];
  chunks(): readonly Buffer[];
}

export function createJournalWriter(): JournalWriter {
  const blocks: Uint8Array[] = [];
  let seq = 0;
  return {
    add(observations) {
      const numbered = observations.map((observation): Observation => ({ ...observation, seq: seq++ }));
      let together: Observation[] = [];
      const flush = (): void => {
        const [first] = together;
        if (first) blocks.push(encodeBlock(first.seq, together));
        together = [];
      };
      for (const observation of numbered) {
        if (!isSensorObservation(observation)) flush();
        together.push(observation);
        if (!isSensorObservation(observation)) flush();
      }
      flush();
      return numbered;
    },
    chunks: () => cut(blocks),
  };
}

function cut(blocks: readonly Uint8Array[]): readonly Buffer[] {
  const chunks: Uint8Array[][] = [];
  let size = Number.POSITIVE_INFINITY;
  for (const block of blocks) {
    if (size + block.length > CHUNK_TARGET_BYTES) {
      chunks.push([]);
      size = 0;
    }
    chunks.at(-1)?.push(block);
    size += block.length;
  }
  return chunks.map((chunk) => Buffer.concat(chunk));
}
