import { z } from 'zod';
import { cockpitSettingsRequestSchema } from './entries.ts';
import { digestSchema, idSchema, unixMsSchema } from './fields.ts';
import { eventRulesSchema, raceClassSchema } from './race-class.ts';
import { runSummarySchema } from './runs.ts';

/** A course book in short: enough to name it and say how long it is. */
export const courseBookSummarySchema = z.object({
  id: idSchema,
  version: z.number().int(),
  name: z.string(),
  unit: z.enum(['km', 'mi']),
  /** Start to finish, metres. */
  lengthM: z.number(),
  checkpoints: z.number().int(),
  zones: z.number().int(),
  publishedMs: unixMsSchema,
});

export const attemptSchema = z.object({
  id: idSchema,
  number: z.number().int(),
  releaseMs: unixMsSchema.nullable(),
  stagedBehindM: z.number(),
  courseBook: courseBookSummarySchema,
  /** The team's own checkpoints over that book. */
  ownCheckpoints: z.number().int(),
  /** Digest a pack loaded now would have; a tablet holding another has an old one. Null when it cannot be made. */
  packDigest: digestSchema.nullable(),
  /** Why the pack cannot be made, else null. */
  packFault: z.string().nullable(),
  countingRunId: idSchema.nullable(),
  /** Runs on the server, newest first. */
  runs: z.array(runSummarySchema),
});

export const entrySchema = z.object({
  id: idSchema,
  number: z.string(),
  team: z.object({ id: idSchema, name: z.string() }),
  car: z.object({ id: idSchema, name: z.string(), wheelSetup: z.string() }),
  crew: z.array(z.object({ name: z.string(), role: z.string() })),
  raceClassId: idSchema,
  /** True where the caller may load packs, set releases and choose the counting run. */
  mayPrepare: z.boolean(),
  /** What a pack loaded now would carry. Null for another team's entry. */
  settings: cockpitSettingsRequestSchema.nullable(),
  attempts: z.array(attemptSchema),
});

export const eventSchema = z.object({
  id: idSchema,
  name: z.string(),
  place: z.string(),
  timeZone: z.string(),
  /** First and last day in the event's zone, YYYY-MM-DD. */
  startsOn: z.string(),
  endsOn: z.string(),
  /** Made for practice: nothing of it is official. */
  practice: z.boolean(),
  /** Name of the team or organiser that owns the event. */
  owner: z.object({ id: idSchema, name: z.string() }),
  rules: eventRulesSchema,
  raceClasses: z.array(raceClassSchema),
  courseBooks: z.array(courseBookSummarySchema),
  entries: z.array(entrySchema),
});

/** GET /api/teams/:teamId/events */
export const eventsResponseSchema = z.object({
  /** The server's clock when it answered, to tell past from coming releases. */
  nowMs: unixMsSchema,
  events: z.array(eventSchema),
  cautions: z.array(z.object({ id: z.string(), text: z.string() })),
});
export type EventsResponse = z.infer<typeof eventsResponseSchema>;

/** POST /api/teams/:teamId/practice-event */
export const practiceEventResponseSchema = z.object({ eventId: idSchema, entryId: idSchema, attemptId: idSchema });
export type PracticeEventResponse = z.infer<typeof practiceEventResponseSchema>;
