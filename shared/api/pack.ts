import { z } from 'zod';
import type { Pack } from '#shared/course/pack.ts';
import { checkpointSchema, courseBookSchema, zoneSchema } from './course-book.ts';
import { digestSchema, idSchema, instantSchema, nameSchema, timeZoneSchema } from './fields.ts';
import { eventRulesSchema, raceClassSchema } from './race-class.ts';
import type { Holds, SameShape } from './type-equality.ts';

const carSchema = z.strictObject({
  id: idSchema,
  name: nameSchema,
  dialReadsHighPercent: z.number().min(-20).max(20),
  behindNose: z.strictObject({ seatM: z.number().min(0).max(20), aerialM: z.number().min(0).max(20) }).exactOptional(),
});

const wheelSchema = z.strictObject({
  setupId: idSchema,
  setupName: nameSchema,
  channel: z.number().int().min(0).max(15),
  pulsesPerTurn: z.number().int().min(1).max(100_000),
  mmPerPulse: z.number().positive().max(5000),
  scaleSigma: z.number().min(0).max(0.2),
  scaleSource: z.enum(['nominal', 'measured distance', 'run']),
  driven: z.boolean().exactOptional(),
  secondChannel: z.number().int().min(0).max(15).exactOptional(),
});

/** Seconds in hand. */
export const reserveSchema = z.number().min(0).max(30);

const planSettingsSchema = z.strictObject({
  acceleration: z.number().positive().max(15),
  deceleration: z.number().positive().max(15),
  capMargin: z.number().min(0).max(0.5),
  reserveS: reserveSchema.exactOptional(),
});

/** What a crew chooses for its screen and its engine. */
export const cockpitSettingsSchema = z.strictObject({
  speedUnit: z.enum(['km/h', 'mph']),
  scaleRule: z.enum(['estimator', 'gain', 'ratio', 'place only']),
  tapLeadMs: z.strictObject({ glass: z.number().min(-1000).max(1000), wired: z.number().min(-1000).max(1000) }),
  tapLeadSigmaMs: z.strictObject({ glass: z.number().positive().max(1000), wired: z.number().positive().max(1000) }).exactOptional(),
  tapScatterMs: z.number().positive().max(1000),
  buttonSide: z.enum(['right', 'left']),
});

/** Everything the cockpit needs for one attempt. Checked here when fetched, trusted by its digest from then on. */
export const packSchema = z.strictObject({
  format: z.literal(1),
  event: z.strictObject({
    id: idSchema,
    name: nameSchema,
    place: z.string().max(120),
    timeZone: timeZoneSchema,
    rules: eventRulesSchema,
  }),
  team: z.strictObject({ id: idSchema, name: nameSchema }),
  entry: z.strictObject({
    id: idSchema,
    number: z.string().min(1).max(8),
    crew: z.array(z.strictObject({ name: nameSchema, role: z.string().max(40) })).max(8),
  }),
  attempt: z.strictObject({
    id: idSchema,
    number: z.number().int().min(1).max(99),
    releaseMs: instantSchema.nullable(),
    stagedBehindM: z.number().min(0).max(200),
  }),
  courseBook: courseBookSchema,
  raceClass: raceClassSchema,
  ownCheckpoints: z.array(checkpointSchema).max(200),
  crewZones: z.array(zoneSchema).max(100),
  car: carSchema,
  wheel: wheelSchema,
  plan: planSettingsSchema,
  settings: cockpitSettingsSchema,
});
export type PackSchemaIsPack = Holds<SameShape<z.infer<typeof packSchema>, Pack>>;

/** POST /api/attempts/:id/pack. `digest` is SHA-256 of the pack's canonical JSON; `grant` is shown this once. */
export const packResponseSchema = z.object({
  digest: digestSchema,
  pack: packSchema,
  /** Bearer token for uploading runs of this entry. */
  grant: z.string().min(32),
  grantExpiresMs: z.number().int(),
});
export type PackResponse = z.infer<typeof packResponseSchema>;
