import type { RunHeader } from '#shared/journal/run-header.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import type { UploadFailureCode } from './retry-policy.ts';

/**
 * The upload calls of one run as values. Written by hand and without zod: the cockpit carries this file. Sends the
 * upload grant where there is one, so that whoever is signed in (or nobody) makes no difference.
 */

export interface UploadFailure {
  readonly code: UploadFailureCode;
  readonly message: string;
  readonly retryAfterMs: number | null;
}

export interface HeldChunks {
  readonly count: number;
  readonly head: string;
}

export interface RunStatusAnswer {
  readonly derived: boolean;
}

type Answer<T> = Promise<Result<T, UploadFailure>>;

export interface UploadClient {
  announce(header: RunHeader): Answer<void>;
  held(): Answer<HeldChunks>;
  putChunk(n: number, bytes: Uint8Array<ArrayBuffer>, digest: string): Answer<void>;
  seal(head: HeldChunks): Answer<void>;
  /** Asked as whoever is signed in: a grant may add to a run, not read it. */
  status(): Answer<RunStatusAnswer>;
}

/** The part of `fetch` this needs; the real one fits. */
export type UploadFetch = (
  url: string,
  init: { method: string; headers: Record<string, string>; body?: string | Uint8Array<ArrayBuffer> },
) => Promise<{ readonly status: number; readonly headers: { get(name: string): string | null }; json(): Promise<unknown> }>;

export function createUploadClient(fetch: UploadFetch, runId: string, grant: string | null): UploadClient {
  const base = `/api/runs/${runId}`;
  const authorization: Record<string, string> = grant === null ? {} : { authorization: `Bearer ${grant}` };
  const call = (method: string, path: string, extra: { headers?: Record<string, string>; body?: string | Uint8Array<ArrayBuffer> } = {}) =>
    request(fetch, base + path, {
      method,
      ...(extra.body === undefined ? {} : { body: extra.body }),
      headers: { ...authorization, ...extra.headers },
    });
  const json = (value: unknown) => ({ headers: { 'content-type': 'application/json' }, body: JSON.stringify(value) });

  return {
    announce: async (header) => done(await call('PUT', '', json(header))),
    held: async () => {
      const answer = await call('GET', '/chunks');
      return answer.ok ? readHeld(answer.value) : answer;
    },
    putChunk: async (n, bytes, digest) =>
      done(
        await call('PUT', `/chunks/${n}`, {
          headers: { 'content-type': 'application/octet-stream', 'x-evenline-digest': digest },
          body: bytes,
        }),
      ),
    seal: async (head) => done(await call('POST', '/seal', json(head))),
    status: async () => {
      const answer = await request(fetch, base, { method: 'GET', headers: {} });
      return answer.ok ? readStatus(answer.value) : answer;
    },
  };
}

async function request(fetch: UploadFetch, url: string, init: Parameters<UploadFetch>[1]): Answer<unknown> {
  try {
    const response = await fetch(url, init);
    if (response.status === 204) return ok(null);
    const body = await response.json().catch(() => undefined);
    if (response.status >= 200 && response.status < 300) return body === undefined ? fail(badAnswer()) : ok(body);
    return fail(readFailure(response.headers.get('retry-after'), body));
  } catch (error) {
    return fail({ code: 'NETWORK', message: error instanceof Error ? error.message : 'No answer', retryAfterMs: null });
  }
}

const done = (answer: Result<unknown, UploadFailure>): Result<void, UploadFailure> => (answer.ok ? ok(undefined) : answer);

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === 'object' && value !== null;

function badAnswer(): UploadFailure {
  return { code: 'BAD_ANSWER', message: 'The answer did not come from an Evenline server.', retryAfterMs: null };
}

/** A proxy's or a captive portal's page has no code of ours: never taken for a refusal by the server. */
function readFailure(retryAfter: string | null, body: unknown): UploadFailure {
  if (!isObject(body) || typeof body['code'] !== 'string') return badAnswer();
  const seconds = retryAfter === null ? Number.NaN : Number(retryAfter);
  return {
    code: body['code'] as UploadFailureCode,
    message: typeof body['message'] === 'string' ? body['message'] : '',
    retryAfterMs: Number.isFinite(seconds) ? seconds * 1000 : null,
  };
}

function readHeld(body: unknown): Result<HeldChunks, UploadFailure> {
  if (!isObject(body) || !Number.isInteger(body['count']) || typeof body['head'] !== 'string') return fail(badAnswer());
  return ok({ count: body['count'] as number, head: body['head'] });
}

/** `failed` is final too: the journal is safe, only its replay went wrong, and the server says why on the run's page. */
function readStatus(body: unknown): Result<RunStatusAnswer, UploadFailure> {
  const status = isObject(body) && isObject(body['run']) ? body['run']['status'] : undefined;
  if (typeof status !== 'string') return fail(badAnswer());
  return ok({ derived: status === 'ready' || status === 'failed' });
}
