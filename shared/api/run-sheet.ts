import { z } from 'zod';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import type { Holds, SameShape } from './type-equality.ts';

const legRowSchema = z.object({
  checkpointId: z.string(),
  name: z.string(),
  duty: z.string(),
  officialM: z.number(),
  by: z.enum(['tap', 'distance', 'skipped', 'not reached']),
  atUs: z.number().nullable(),
  elapsedS: z.number().nullable(),
  targetS: z.number(),
  timeErrorS: z.number().nullable(),
  plannedS: z.number(),
  measuredM: z.number().nullable(),
  movedM: z.number().nullable(),
  scaleBefore: z.number(),
  scaleAfter: z.number(),
  scaleKept: z.string().nullable(),
});

const tapRowSchema = z.object({
  seq: z.number(),
  checkpoint: z.string().nullable(),
  verdict: z.enum(['provisional', 'used', 'doubted', 'no place near', 'repeated', 'voided']),
  movedM: z.number(),
  figures: z
    .object({
      input: z.enum(['glass', 'wired']),
      misfitM: z.number(),
      varianceM2: z.number(),
      surveySigmaM: z.number(),
      speed: z.number(),
    })
    .exactOptional(),
});

/** The story of a run afterwards. Metres, seconds (positive = late), millimetres per pulse. */
export const runSheetSchema = z.object({
  engine: z.string(),
  runId: z.string(),
  outcome: z.enum(['open', 'finished', 'rerun', 'void', 'retired']),
  practice: z.boolean(),
  clockRate: z.number(),
  releaseMs: z.number().nullable(),
  targetTimeS: z.number(),
  reactionS: z.number().nullable(),
  legs: z.array(legRowSchema),
  finish: z.object({ elapsedS: z.number(), timeErrorS: z.number(), sigmaS: z.number() }).nullable(),
  shown: z.object({ engine: z.string(), elapsedS: z.number(), timeErrorS: z.number(), agrees: z.boolean() }).nullable(),
  trace: z.array(z.object({ d: z.number(), elapsedS: z.number(), timeErrorS: z.number(), plannedS: z.number(), speed: z.number() })),
  stops: z.array(z.object({ fromS: z.number(), toS: z.number().nullable(), d: z.number() })),
  taps: z.array(tapRowSchema),
  aidsUsed: z.array(z.enum(['wheel', 'gnss speed', 'gnss position'])),
  pulses: z.number(),
  observations: z.number(),
  unknownTypes: z.array(z.string()),
  warnings: z.array(z.string()),
});
export type RunSheetSchemaIsRunSheet = Holds<SameShape<z.infer<typeof runSheetSchema>, RunSheet>>;
