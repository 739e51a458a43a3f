import { fail, type Result } from '#shared/result.ts';
import type { StorageFailure } from './stored-block.ts';

const MESSAGES: Readonly<Record<StorageFailure['code'], string>> = {
  quota: 'This device has no room left. Free some space; the run goes on in memory and is written as soon as there is room.',
  unavailable: 'The journal cannot be written here just now. The run goes on in memory and writing is tried again.',
  corrupt: 'This part of the journal is damaged.',
  'unknown-run': 'This device holds no such run.',
  'out-of-order': 'These observations do not follow what is stored; another window may be recording this run.',
  'not-safe': 'Not yet safe on the server, so it is kept on this device.',
};

export function storageFailure(code: StorageFailure['code'], detail = ''): StorageFailure {
  return { code, message: detail === '' ? MESSAGES[code] : `${MESSAGES[code]} (${detail})` };
}

export const storageFail = (code: StorageFailure['code'], detail = '') => fail(storageFailure(code, detail));

/** Dexie hides the browser's reason inside its own errors. */
export function failureOf(error: unknown): StorageFailure {
  const names = namesIn(error);
  if (names.includes('QuotaExceededError')) return storageFailure('quota');
  return storageFailure('unavailable', error instanceof Error ? error.message : String(error));
}

const CLOSED = ['DatabaseClosedError', 'InvalidStateError', 'TransactionInactiveError', 'AbortError', 'UnknownError'];

/** True where opening the database again may help: the browser closed it, or another window asked for it. */
export function isClosed(error: unknown): boolean {
  const names = namesIn(error);
  return !names.includes('QuotaExceededError') && names.some((name) => CLOSED.includes(name));
}

function namesIn(error: unknown): readonly string[] {
  if (!(error instanceof Error)) return [];
  const inner = (error as { readonly inner?: unknown }).inner;
  return [error.name, ...(inner === error ? [] : namesIn(inner))];
}

/** @throws Error with the failure's sentence, for calls whose callers cannot go on without an answer. */
export function valueOrThrow<T>(result: Result<T, StorageFailure>): T {
  if (result.ok) return result.value;
  throw new Error(result.error.message);
}
