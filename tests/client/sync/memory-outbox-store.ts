import type { RunHeader } from '#shared/journal/run-header.ts';
import { ok } from '#shared/result.ts';
import type { ChunkStore, KeptChunk } from '#src/storage/chunk-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { NOTHING_SENT, type UploadProgress } from '#src/storage/upload-progress.ts';

/** A device's storage that survives the lives of its pages. `step` stands for the disk: a page may die there. */
export interface DeviceRun {
  readonly header: RunHeader;
  readonly blocks: StoredBlock[];
  ended: boolean;
  progress: UploadProgress;
  readonly chunks: KeptChunk[];
}

export interface Device {
  readonly runs: Map<string, DeviceRun>;
  grant: string | null;
}

export function addRun(device: Device, header: RunHeader, blocks: StoredBlock[], ended: boolean): DeviceRun {
  const run: DeviceRun = { header, blocks, ended, progress: NOTHING_SENT, chunks: [] };
  device.runs.set(header.runId, run);
  return run;
}

export function memoryOutboxStore(device: Device, step: () => Promise<void>): ChunkStore {
  const runOf = (runId: string): DeviceRun => {
    const run = device.runs.get(runId);
    if (run === undefined) throw new Error(`no run ${runId}`);
    return run;
  };
  return {
    pending: async () => {
      await step();
      return [...device.runs.values()]
        .filter((run) => !run.progress.derived)
        .map((run) => ({ runId: run.header.runId, header: run.header, ended: run.ended, progress: run.progress }));
    },
    blocks: async (runId, fromSeq) => {
      await step();
      return ok(runOf(runId).blocks.filter((block) => block.firstSeq >= fromSeq));
    },
    chunks: async (runId) => {
      await step();
      return [...runOf(runId).chunks];
    },
    // A commit happens or not; the page may die before it or after it, never in the middle.
    keepChunks: async (runId, chunks) => {
      await step();
      runOf(runId).chunks.push(...chunks);
      await step();
    },
    progress: async (runId, change) => {
      await step();
      const run = runOf(runId);
      run.progress = { ...run.progress, ...change };
      await step();
    },
    grant: async () => {
      await step();
      return device.grant;
    },
  };
}
