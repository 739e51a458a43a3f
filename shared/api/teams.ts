import { z } from 'zod';
import { MEMBER_ROLES, TEAM_KINDS } from './auth.ts';
import { idSchema, unixMsSchema } from './fields.ts';

export const carSummarySchema = z.object({ id: idSchema, name: z.string(), dialReadsHighPercent: z.number() });

/** Metres behind the car's nose. */
export const behindNoseSchema = z.object({ seatM: z.number(), aerialM: z.number() });

/** GET /api/teams/:teamId */
export const teamResponseSchema = z.object({
  team: z.object({ id: idSchema, name: z.string(), kind: z.enum(TEAM_KINDS) }),
  myRole: z.enum(MEMBER_ROLES),
  members: z.array(z.object({ userId: idSchema, name: z.string(), role: z.enum(MEMBER_ROLES) })),
  cars: z.array(carSummarySchema),
});
export type TeamResponse = z.infer<typeof teamResponseSchema>;

export const wheelScaleSchema = z.object({
  id: idSchema,
  mmPerPulse: z.number(),
  /** One standard deviation as a fraction. */
  scaleSigma: z.number(),
  source: z.enum(['nominal', 'measured distance', 'run']),
  /** The run it came from, where the source is a run. */
  runId: idSchema.nullable(),
  note: z.string(),
  recordedMs: unixMsSchema,
});

export const wheelSetupSchema = z.object({
  id: idSchema,
  name: z.string(),
  tyre: z.string(),
  channel: z.number().int(),
  pulsesPerTurn: z.number().int(),
  /** The engine drives the measured wheel. */
  driven: z.boolean(),
  /** Channel of another wheel to compare with; null where only one is counted. */
  secondChannel: z.number().int().nullable(),
  /** Newest first; the first is the one in use. */
  scales: z.array(wheelScaleSchema),
});

/** GET /api/teams/:teamId/garage */
export const garageResponseSchema = z.object({
  /** `behindNose` null where nobody has measured. */
  cars: z.array(carSummarySchema.extend({ behindNose: behindNoseSchema.nullable(), wheelSetups: z.array(wheelSetupSchema) })),
});
export type GarageResponse = z.infer<typeof garageResponseSchema>;
