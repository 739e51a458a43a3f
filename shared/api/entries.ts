import { z } from 'zod';
import { idSchema } from './fields.ts';

/** POST /api/entries/:id/counting-run: of several runs of one attempt, the one that counts. */
export const setCountingRunRequestSchema = z.strictObject({ runId: idSchema });
export type SetCountingRunRequest = z.infer<typeof setCountingRunRequestSchema>;

export const setCountingRunResponseSchema = z.object({ attemptId: idSchema, countingRunId: idSchema });
export type SetCountingRunResponse = z.infer<typeof setCountingRunResponseSchema>;

/** POST /api/entries/:id/revoke-grants: ends every upload grant of the entry, for a tablet that was lost. */
export const revokeGrantsResponseSchema = z.object({ revoked: z.number().int().nonnegative() });
export type RevokeGrantsResponse = z.infer<typeof revokeGrantsResponseSchema>;
