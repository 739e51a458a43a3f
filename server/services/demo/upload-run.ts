import { v7 as uuidv7 } from 'uuid';
import type { ServiceContext } from '#server/services/context.ts';
import { loadPack } from '#server/services/packs/load-pack.ts';
import { appendChunk } from '#server/services/runs/append-chunk.ts';
import { chainDigest } from '#server/services/runs/chain.ts';
import { computeResult, type Replay } from '#server/services/runs/compute-result.ts';
import { createRun } from '#server/services/runs/create-run.ts';
import { sealRun } from '#server/services/runs/seal-run.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { type DriveScript, driveRun, GRID_MS } from './drive-run.ts';

export interface DemoRun extends Pick<DriveScript, 'seed' | 'forgets' | 'redFlagAfterS'> {
  readonly attemptId: string;
  readonly deviceId: string;
  readonly appVersion: string;
}

/** Drives a run and sends it the way a tablet does: pack, header, chunks in order, seal; then its replay. */
export async function uploadRun(ctx: ServiceContext, run: DemoRun, replay: Replay): Promise<string> {
  const { digest, pack } = await loadPack(ctx, run.attemptId);
  const { releaseMs } = pack.attempt;
  if (releaseMs === null) throw new Error('a demo run needs a release');
  const createdMs = releaseMs - GRID_MS;
  const runId = uuidv7({ msecs: createdMs });
  const { deviceId, attemptId, appVersion } = run;
  const header: RunHeader = {
    format: 'evenline-journal',
    version: 1,
    runId,
    deviceId,
    entryId: pack.entry.id,
    attemptId,
    packDigest: digest,
    pack,
    clockRate: 1,
    practice: false,
    createdMs,
    appVersion,
  };
  const chunks = driveRun({ pack, releaseMs, seed: run.seed, forgets: run.forgets, redFlagAfterS: run.redFlagAfterS });
  await createRun(ctx, runId, header);
  let head = ZERO_DIGEST;
  for (const [n, bytes] of chunks.entries()) {
    head = chainDigest(head, bytes);
    await appendChunk(ctx, runId, { n, bytes, digest: head });
  }
  await sealRun(ctx, runId, { count: chunks.length, head });
  await computeResult(ctx, runId, replay);
  return runId;
}
