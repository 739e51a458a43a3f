import type { Pack } from '#shared/course/pack.ts';

/** Line 1 of an exported journal, and what `PUT /api/runs/:id` carries. A run belongs to (entry, attempt, device). */
export interface RunHeader {
  readonly format: 'evenline-journal';
  readonly version: 1;
  /** UUIDv7, made on the device. */
  readonly runId: string;
  readonly deviceId: string;
  readonly entryId: string;
  readonly attemptId: string;
  readonly packDigest: string;
  readonly pack: Pack;
  /** Rate of the session clock: 1 on a real run; above 1 only in practice and tests. */
  readonly clockRate: number;
  /** True when the simulator drove: such a run never counts. */
  readonly practice: boolean;
  /** Wall clock of the device when the run was made, unix ms. */
  readonly createdMs: number;
  readonly appVersion: string;
}
