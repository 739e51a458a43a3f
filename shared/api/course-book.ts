import { z } from 'zod';
import { type CourseBook, DUTIES } from '#shared/course/course-book.ts';
import { idSchema, nameSchema } from './fields.ts';
import type { Holds, SameShape } from './type-equality.ts';

export const printedDistanceSchema = z.strictObject({
  text: z.string().regex(/^\d{1,4}(\.\d{1,6})?$/, 'must be a distance as printed, for example 12.345'),
  unit: z.enum(['km', 'mi']),
});
export const printedSpeedSchema = z.strictObject({
  text: z.string().regex(/^\d{1,3}(\.\d{1,3})?$/, 'must be a speed as printed, for example 180'),
  unit: z.enum(['km/h', 'mph']),
});

/** Ids inside a book: short names, unique in the book. */
export const placeIdSchema = z.string().regex(/^[A-Za-z0-9][A-Za-z0-9-]{0,63}$/);

export const checkpointSchema = z.strictObject({
  id: placeIdSchema,
  name: nameSchema,
  duty: z.enum(DUTIES),
  at: printedDistanceSchema,
  source: z.enum(['official', 'own']),
  side: z.enum(['left', 'right']).nullable(),
  note: z.string().max(500),
  position: z.strictObject({ lat: z.number().min(-90).max(90), lon: z.number().min(-180).max(180) }).nullable(),
});

export const zoneSchema = z.strictObject({
  id: placeIdSchema,
  name: nameSchema,
  from: printedDistanceSchema,
  to: printedDistanceSchema,
  limit: printedSpeedSchema,
  source: z.enum(['official', 'crew']),
});

export const courseBookSchema = z.strictObject({
  id: idSchema,
  version: z.number().int().min(1).max(100_000),
  name: nameSchema,
  unit: z.enum(['km', 'mi']),
  checkpoints: z.array(checkpointSchema).max(200),
  zones: z.array(zoneSchema).max(100),
  slowDownLimit: printedSpeedSchema.nullable(),
  notes: z.string().max(4000),
  geometry: z
    .array(z.strictObject({ lat: z.number().min(-90).max(90), lon: z.number().min(-180).max(180), d: z.number().min(-5000).max(500_000) }))
    .max(20_000)
    .exactOptional(),
});
export type CourseBookSchemaIsCourseBook = Holds<SameShape<z.infer<typeof courseBookSchema>, CourseBook>>;

/** POST /api/teams/:teamId/course-books. With `courseBookId` it publishes the next version of that book. */
export const publishCourseBookRequestSchema = courseBookSchema
  .omit({ id: true, version: true })
  .extend({ courseBookId: idSchema.nullable() });
export type PublishCourseBookRequest = z.infer<typeof publishCourseBookRequestSchema>;

/** GET /api/course-books/:id (`?version=` for an earlier one) and the answer to publishing. */
export const courseBookResponseSchema = z.object({ courseBook: courseBookSchema, publishedMs: z.number().int() });
export type CourseBookResponse = z.infer<typeof courseBookResponseSchema>;
