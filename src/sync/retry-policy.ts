import type { ErrorCode } from '#shared/api/error-codes.ts';

/**
 * What to do after a failed upload call: a pure table from error code and attempt to "wait", "resume" or "give up".
 * Decides on codes only; it knows neither clock nor network.
 */

/** The server's codes, and what this device finds out by itself: no answer, a foreign answer, an unreadable journal. */
export type UploadFailureCode = ErrorCode | 'NETWORK' | 'BAD_ANSWER' | 'JOURNAL_DAMAGED' | 'STORAGE';

export type RetryDecision =
  | { readonly kind: 'wait'; readonly ms: number }
  /** Ask the server what it holds and go on from there, at once. */
  | { readonly kind: 'resume' }
  | { readonly kind: 'give up'; readonly reason: string };

export const FIRST_WAIT_MS = 1_000;
export const LONGEST_WAIT_MS = 5 * 60_000;

const KEEP = 'Nothing is lost: the journal stays on this device. Export it from the run sheet.';
const OTHER_BYTES = `The server holds other contents for this run. ${KEEP}`;
const UNREADABLE = `The server cannot read what this version sent. Update Evenline and try again. ${KEEP}`;
const WHO = 'This tablet may not upload for this entry any more. Sign in as a member of the team, or store the pack again; then try again.';

/** Refusals that no repetition can mend, each with what the person can do. Every other code is worth another try. */
const PERMANENT: Readonly<Partial<Record<UploadFailureCode, string>>> = {
  INVALID_REQUEST: UNREADABLE,
  UNSUPPORTED_CONTENT_TYPE: UNREADABLE,
  PAYLOAD_TOO_LARGE: UNREADABLE,
  CORRUPT_CHUNK: UNREADABLE,
  SIGN_IN_REQUIRED: WHO,
  CROSS_ORIGIN: `The server does not take this address for its own. Open Evenline at the address it was set up for. ${KEEP}`,
  FORBIDDEN: WHO,
  GRANT_INVALID: WHO,
  NOT_FOUND: WHO,
  RUN_NOT_FOUND: WHO,
  PACK_UNKNOWN: `The server does not know the pack of this run. ${KEEP}`,
  RUN_ID_MISMATCH: UNREADABLE,
  RUN_ID_TAKEN: OTHER_BYTES,
  RUN_CONFLICT: OTHER_BYTES,
  RUN_SEALED: OTHER_BYTES,
  DIGEST_MISMATCH: OTHER_BYTES,
  SEAL_MISMATCH: OTHER_BYTES,
  JOURNAL_DAMAGED: 'Part of the journal on this device cannot be read. Export what is there from the run sheet and keep it.',
};

export interface RetryQuestion {
  readonly code: UploadFailureCode;
  /** Failures in a row without any confirmed progress, from 1. */
  readonly attempt: number;
  /** What the server asked for in Retry-After, or null. */
  readonly retryAfterMs: number | null;
}

/** Waits double from one second to five minutes; a longer Retry-After is cut to five minutes as well. */
export function decideRetry({ code, attempt, retryAfterMs }: RetryQuestion): RetryDecision {
  if (code === 'SEQUENCE_GAP' && attempt === 1) return { kind: 'resume' };
  const reason = PERMANENT[code];
  if (reason !== undefined) return { kind: 'give up', reason };
  const backoff = FIRST_WAIT_MS * 2 ** Math.min(attempt - 1, 20);
  return { kind: 'wait', ms: Math.min(LONGEST_WAIT_MS, Math.max(backoff, retryAfterMs ?? 0)) };
}
