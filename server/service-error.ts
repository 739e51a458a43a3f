import type { Fault } from '#shared/api/error-body.ts';
import type { ErrorCode } from '#shared/api/error-codes.ts';

/** An expected failure of a service: a code from the closed list and a sentence that tells the person what to do. */
export class ServiceError extends Error {
  readonly code: ErrorCode;
  readonly details: ServiceErrorDetails;

  constructor(code: ErrorCode, message: string, details: ServiceErrorDetails = {}) {
    super(message);
    this.name = 'ServiceError';
    this.code = code;
    this.details = details;
  }
}

export interface ServiceErrorDetails {
  /** With SEQUENCE_GAP: the chunk number that comes next. */
  readonly expected?: number;
  readonly faults?: readonly Fault[];
  /** With TOO_MANY_ATTEMPTS and BUSY: seconds to wait. */
  readonly retryAfterS?: number;
}
