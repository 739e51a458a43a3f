import { z } from 'zod';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { digestSchema, idSchema, instantSchema } from './fields.ts';
import { packSchema } from './pack.ts';
import type { Holds, SameShape } from './type-equality.ts';

export const runHeaderSchema = z.strictObject({
  format: z.literal('evenline-journal'),
  version: z.literal(1),
  runId: z.uuidv7(),
  deviceId: z.string().min(1).max(64),
  entryId: idSchema,
  attemptId: idSchema,
  packDigest: digestSchema,
  pack: packSchema,
  clockRate: z.number().positive().max(1000),
  practice: z.boolean(),
  createdMs: instantSchema,
  appVersion: z.string().min(1).max(40),
});
export type RunHeaderSchemaIsRunHeader = Holds<SameShape<z.infer<typeof runHeaderSchema>, RunHeader>>;
