import type { RunHeader } from '#shared/journal/run-header.ts';
import { IDS, samplePack } from './sample-pack.ts';

export const sampleHeader: RunHeader = {
  format: 'evenline-journal',
  version: 1,
  runId: IDS.run,
  deviceId: 'tablet-1',
  entryId: IDS.entry,
  attemptId: IDS.morning,
  packDigest: 'a'.repeat(64),
  pack: samplePack,
  clockRate: 1,
  practice: false,
  createdMs: Date.UTC(2026, 5, 13, 8, 12),
  appVersion: '0.1.0',
};
