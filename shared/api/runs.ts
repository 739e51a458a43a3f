import { z } from 'zod';
import { digestSchema, idSchema, unixMsSchema } from './fields.ts';
import { packSchema } from './pack.ts';
import { runSheetSchema } from './run-sheet.ts';

/** Largest chunk the server takes: whole blocks up to 256 KiB, and room for the block that crosses the line. */
export const CHUNK_TARGET_BYTES = 256 * 1024;
export const CHUNK_MAX_BYTES = CHUNK_TARGET_BYTES + 64 * 1024;
/** Header of a chunk's request and answer: SHA-256(previous digest ‖ bytes), hex; the first previous is 32 zero bytes. */
export const DIGEST_HEADER = 'x-evenline-digest';

/** receiving: chunks still come; computing: sealed, being replayed; ready: the run sheet is there; failed: see `failure`. */
export const runStatusSchema = z.enum(['receiving', 'computing', 'ready', 'failed']);

export const runSummarySchema = z.object({
  id: idSchema,
  eventId: idSchema,
  eventName: z.string(),
  timeZone: z.string(),
  entryId: idSchema,
  entryNumber: z.string(),
  carName: z.string(),
  attemptId: idSchema,
  attemptNumber: z.number().int(),
  courseBookName: z.string(),
  raceClassName: z.string(),
  deviceId: z.string(),
  practice: z.boolean(),
  clockRate: z.number(),
  createdMs: unixMsSchema,
  status: runStatusSchema,
  counts: z.boolean(),
  outcome: z.enum(['open', 'finished', 'rerun', 'void', 'retired']).nullable(),
  finish: z.object({ elapsedS: z.number(), timeErrorS: z.number(), sigmaS: z.number() }).nullable(),
});
export type RunSummary = z.infer<typeof runSummarySchema>;

/** GET /api/teams/:teamId/runs, newest first. */
export const runsResponseSchema = z.object({ runs: z.array(runSummarySchema) });
export type RunsResponse = z.infer<typeof runsResponseSchema>;

/** PUT /api/runs/:id (201 new, 200 the same again), GET /api/runs/:id/chunks, PUT /api/runs/:id/chunks/:n (201). */
export const heldResponseSchema = z.object({
  runId: idSchema,
  /** Chunks held, so the next is chunk number `count`. */
  count: z.number().int().nonnegative(),
  /** Digest of the last chunk; 64 zeros for none. */
  head: digestSchema,
  sealed: z.boolean(),
});
export type HeldResponse = z.infer<typeof heldResponseSchema>;

/** POST /api/runs/:id/seal. Answers 202 with `sealResponseSchema`. */
export const sealRequestSchema = z.strictObject({ count: z.number().int().min(1).max(1_000_000), head: digestSchema });
export type SealRequest = z.infer<typeof sealRequestSchema>;
export const sealResponseSchema = z.object({ runId: idSchema, head: digestSchema, status: runStatusSchema });
export type SealResponse = z.infer<typeof sealResponseSchema>;

/** GET /api/runs/:id */
export const runResponseSchema = z.object({
  run: runSummarySchema,
  held: heldResponseSchema,
  /** The pack the run was driven with: its course book, class and units are what the sheet speaks of. */
  pack: packSchema,
  /** Null until `status` is ready. */
  sheet: runSheetSchema.nullable(),
  /** What the sheet was derived from. */
  result: z
    .object({
      engine: z.string(),
      packDigest: digestSchema,
      journalHead: digestSchema,
      amendmentHead: digestSchema,
      computedMs: unixMsSchema,
    })
    .nullable(),
  /** Why the replay failed; the journal itself is safe. */
  failure: z.object({ message: z.string(), atMs: unixMsSchema }).nullable(),
});
export type RunResponse = z.infer<typeof runResponseSchema>;
