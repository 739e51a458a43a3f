import { z } from 'zod';
import type { EventRules, RaceClass } from '#shared/course/race-class.ts';
import { printedDistanceSchema, printedSpeedSchema } from './course-book.ts';
import { idSchema, nameSchema } from './fields.ts';
import type { Holds, SameShape } from './type-equality.ts';

/** Longer than any course: a day. */
const DAY_MS = 86_400_000;

export const sectionSchema = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('average'), to: printedDistanceSchema, average: printedSpeedSchema }),
  z.strictObject({ kind: z.literal('neutral'), to: printedDistanceSchema, timeMs: z.number().int().min(1).max(DAY_MS) }),
]);

export const aidsSchema = z.strictObject({
  wheel: z.boolean(),
  gnssSpeed: z.boolean(),
  gnssPosition: z.boolean(),
  dataLink: z.boolean(),
});

export const raceClassSchema = z.strictObject({
  id: idSchema,
  name: nameSchema,
  targetTimeMs: z.number().int().min(1).max(DAY_MS),
  sections: z.array(sectionSchema).min(1).max(50),
  cap: printedSpeedSchema.nullable(),
  floor: printedSpeedSchema.nullable(),
  aids: aidsSchema,
});
export type RaceClassSchemaIsRaceClass = Holds<SameShape<z.infer<typeof raceClassSchema>, RaceClass>>;

export const eventRulesSchema = z.strictObject({
  timeStart: z.enum(['scheduled', 'beam', 'flag']),
  timeUnitMs: z.number().int().min(1).max(60_000),
  rounding: z.enum(['cut', 'round']),
  timeBasis: z.enum(['clock', 'elapsed']),
  ties: z.enum(['shared', 'earlier run', 'rerun']),
  sumOfRuns: z.number().int().min(1).max(20),
});
export type EventRulesSchemaIsEventRules = Holds<SameShape<z.infer<typeof eventRulesSchema>, EventRules>>;
