/**
 * Every code an answer may carry. Clients decide on the code, never on the status or the
 * sentence; the sentence is for the person and says what to do. Without zod, because rooms of the cockpit's bundle read the codes too.
 */
export const ERROR_CODES = [
  // what was sent
  'INVALID_REQUEST',
  'PAYLOAD_TOO_LARGE',
  'UNSUPPORTED_CONTENT_TYPE',
  'COURSE_BOOK_INVALID',
  // who sent it
  'SIGN_IN_REQUIRED',
  'SIGN_IN_FAILED',
  'TOO_MANY_ATTEMPTS',
  'EMAIL_TAKEN',
  'PASSWORD_TOO_COMMON',
  'CROSS_ORIGIN',
  'FORBIDDEN',
  'GRANT_INVALID',
  // what it is about
  'NOT_FOUND',
  'RUN_NOT_FOUND',
  'PACK_NOT_READY',
  'PACK_UNKNOWN',
  'PRACTICE_EVENT_EXISTS',
  // run upload
  'RUN_ID_MISMATCH',
  'RUN_ID_TAKEN',
  'RUN_CONFLICT',
  'RUN_SEALED',
  'RUN_NOT_SEALED',
  'RUN_IS_PRACTICE',
  'SEQUENCE_GAP',
  'DIGEST_MISMATCH',
  'CORRUPT_CHUNK',
  'SEAL_MISMATCH',
  // the house
  'BUSY',
  'INTERNAL',
] as const;
export type ErrorCode = (typeof ERROR_CODES)[number];
