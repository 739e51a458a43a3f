// @vitest-environment node
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ERROR_CODES } from '#shared/api/error-codes.ts';
import { decideRetry, FIRST_WAIT_MS, LONGEST_WAIT_MS, type UploadFailureCode } from '#src/sync/retry-policy.ts';

const ALL: readonly UploadFailureCode[] = [...ERROR_CODES, 'NETWORK', 'BAD_ANSWER', 'JOURNAL_DAMAGED', 'STORAGE'];
const decide = (code: UploadFailureCode, attempt: number, retryAfterMs: number | null = null) =>
  decideRetry({ code, attempt, retryAfterMs });

describe('retry policy', () => {
  it('doubles the wait from one second up to five minutes', () => {
    const waits = Array.from({ length: 12 }, (_, i) => decide('NETWORK', i + 1));
    expect(waits.slice(0, 4)).toEqual([1, 2, 4, 8].map((s) => ({ kind: 'wait', ms: s * 1000 })));
    expect(waits.at(-1)).toEqual({ kind: 'wait', ms: 300_000 });
  });

  it('waits as long as the server asks, within the cap', () => {
    expect(decide('BUSY', 1, 20_000)).toEqual({ kind: 'wait', ms: 20_000 });
    expect(decide('BUSY', 1, 3_600_000)).toEqual({ kind: 'wait', ms: LONGEST_WAIT_MS });
  });

  it('resumes at once after a gap, but not for ever', () => {
    expect(decide('SEQUENCE_GAP', 1)).toEqual({ kind: 'resume' });
    expect(decide('SEQUENCE_GAP', 2)).toEqual({ kind: 'wait', ms: 2 * FIRST_WAIT_MS });
  });

  it.each(['FORBIDDEN', 'GRANT_INVALID', 'SIGN_IN_REQUIRED', 'DIGEST_MISMATCH', 'RUN_SEALED', 'INVALID_REQUEST'] as const)(
    'gives up on %s with a sentence that says what to do',
    (code) => {
      const decision = decide(code, 1);
      expect(decision.kind).toBe('give up');
      expect(decision.kind === 'give up' ? decision.reason : '').toMatch(/\.$/);
    },
  );

  it.each(['NETWORK', 'BAD_ANSWER', 'BUSY', 'INTERNAL', 'TOO_MANY_ATTEMPTS', 'STORAGE'] as const)('never gives up on %s', (code) => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 1_000_000 }), (attempt) => decide(code, attempt).kind === 'wait'));
  });

  it('answers every code within the cap and never with zero patience', () => {
    fc.assert(
      fc.property(fc.constantFrom(...ALL), fc.integer({ min: 1, max: 10_000 }), fc.option(fc.nat()), (code, attempt, after) => {
        const decision = decide(code, attempt, after);
        return decision.kind !== 'wait' || (decision.ms >= FIRST_WAIT_MS && decision.ms <= LONGEST_WAIT_MS);
      }),
    );
  });

  it('reads a code of a newer server as worth another try', () => {
    expect(decide('SOMETHING_NEW' as UploadFailureCode, 1)).toEqual({ kind: 'wait', ms: FIRST_WAIT_MS });
  });
});
