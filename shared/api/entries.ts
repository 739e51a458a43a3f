import { z } from 'zod';
import { idSchema } from './fields.ts';
import { cockpitSettingsSchema, reserveSchema } from './pack.ts';

/** POST /api/entries/:id/counting-run: of several runs of one attempt, the one that counts. */
export const setCountingRunRequestSchema = z.strictObject({ runId: idSchema });
export type SetCountingRunRequest = z.infer<typeof setCountingRunRequestSchema>;

export const setCountingRunResponseSchema = z.object({ attemptId: idSchema, countingRunId: idSchema });
export type SetCountingRunResponse = z.infer<typeof setCountingRunResponseSchema>;

/** POST /api/entries/:id/revoke-grants: ends every upload grant of the entry, for a tablet that was lost. */
export const revokeGrantsResponseSchema = z.object({ revoked: z.number().int().nonnegative() });
export type RevokeGrantsResponse = z.infer<typeof revokeGrantsResponseSchema>;

/**
 * PATCH /api/entries/:id/cockpit-settings, and its answer: the settings as a whole, the reserve of the plan among them.
 * Without `tapLeadSigmaMs` the leads count as not learnt yet.
 */
export const cockpitSettingsRequestSchema = cockpitSettingsSchema.extend({ reserveS: reserveSchema });
export type CockpitSettingsRequest = z.infer<typeof cockpitSettingsRequestSchema>;
