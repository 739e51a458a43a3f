import { z } from 'zod';
import type { EventRules, RaceClass, ScoreRules } from '#shared/course/race-class.ts';
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

/** Keeps every sum of points a safe integer: a day in milliseconds, times this, times the most runs, is below 2^53. */
const MOST_PER_UNIT = 1_000_000;
const MOST_POINTS = 1_000_000_000;
const pointsSchema = z.number().int().min(0).max(MOST_POINTS);

export const scoreRulesSchema = z.strictObject({
  unitMs: z.number().int().min(1).max(DAY_MS),
  partUnit: z.enum(['cut', 'round', 'begun']),
  earlyPerUnit: z.number().int().min(0).max(MOST_PER_UNIT),
  latePerUnit: z.number().int().min(0).max(MOST_PER_UNIT),
  floor: pointsSchema,
  cap: pointsSchema.nullable(),
  missing: z.strictObject({
    didNotStart: pointsSchema.nullable(),
    didNotFinish: pointsSchema.nullable(),
    noTime: pointsSchema.nullable(),
    excluded: pointsSchema.nullable(),
  }),
  counting: z.enum(['best', 'first']),
});
export type ScoreRulesSchemaIsScoreRules = Holds<SameShape<z.infer<typeof scoreRulesSchema>, ScoreRules>>;

export const eventRulesSchema = z.strictObject({
  timeStart: z.enum(['scheduled', 'beam', 'flag']),
  timeUnitMs: z.number().int().min(1).max(60_000),
  rounding: z.enum(['cut', 'round']),
  timeBasis: z.enum(['clock', 'elapsed']),
  ties: z.enum(['shared', 'earlier run', 'rerun']),
  sumOfRuns: z.number().int().min(1).max(20),
  score: scoreRulesSchema.exactOptional(),
});
export type EventRulesSchemaIsEventRules = Holds<SameShape<z.infer<typeof eventRulesSchema>, EventRules>>;
