import type { Fault } from '#shared/api/error-body.ts';
import type { ErrorCode } from '#shared/api/error-codes.ts';

/** NETWORK: no answer came. BAD_ANSWER: an answer came that is not ours (a portal, a proxy, another version). */
export type ApiErrorCode = ErrorCode | 'NETWORK' | 'BAD_ANSWER';

/** What every request of this folder throws. Pages decide what to show, by `code`. */
export class ApiError extends Error {
  readonly code: ApiErrorCode;
  readonly requestId: string | null;
  readonly status: number | null;
  readonly faults: readonly Fault[];

  constructor(code: ApiErrorCode, message: string, more: { requestId?: string; status?: number; faults?: readonly Fault[] } = {}) {
    super(message);
    this.name = 'ApiError';
    this.code = code;
    this.requestId = more.requestId ?? null;
    this.status = more.status ?? null;
    this.faults = more.faults ?? [];
  }
}

export const hasCode = (error: unknown, code: ApiErrorCode): boolean => error instanceof ApiError && error.code === code;
