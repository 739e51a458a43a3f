import { z } from 'zod';
import { idSchema, instantSchema, unixMsSchema } from './fields.ts';

/** PATCH /api/attempts/:id. Null clears the release. */
export const setReleaseRequestSchema = z.strictObject({ releaseMs: instantSchema.nullable() });
export type SetReleaseRequest = z.infer<typeof setReleaseRequestSchema>;

export const setReleaseResponseSchema = z.object({ id: idSchema, releaseMs: unixMsSchema.nullable() });
export type SetReleaseResponse = z.infer<typeof setReleaseResponseSchema>;
