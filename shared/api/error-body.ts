import { z } from 'zod';
import { ERROR_CODES } from './error-codes.ts';

/** The one shape of an error answer. */

export const faultSchema = z.object({ code: z.string(), where: z.string(), message: z.string() });
export type Fault = z.infer<typeof faultSchema>;

export const errorBodySchema = z.object({
  code: z.enum(ERROR_CODES),
  message: z.string(),
  requestId: z.string(),
  /** With SEQUENCE_GAP: the chunk number that comes next. */
  expected: z.number().int().nonnegative().optional(),
  /** With COURSE_BOOK_INVALID, PACK_NOT_READY and INVALID_REQUEST: each fault with its place. */
  faults: z.array(faultSchema).optional(),
});
export type ErrorBody = z.infer<typeof errorBodySchema>;
