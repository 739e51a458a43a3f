import type { z } from 'zod';
import { errorBodySchema } from '#shared/api/error-body.ts';
import { ApiError } from './api-error.ts';

/** One way to the server: same origin, JSON both ways, answers parsed by the shared schema, failures thrown as ApiError. */
export interface RequestOptions {
  readonly method?: 'GET' | 'POST' | 'PUT' | 'PATCH';
  readonly body?: unknown;
  readonly signal?: AbortSignal;
}

export async function request<S extends z.ZodType>(schema: S, path: string, options: RequestOptions = {}): Promise<z.infer<S>> {
  const response = await send(path, options);
  const body: unknown = await response.json().catch(() => undefined);
  const parsed = schema.safeParse(body);
  if (parsed.success) return parsed.data;
  throw new ApiError('BAD_ANSWER', 'The server answered in a form this version does not know. Update Evenline and try again.', {
    status: response.status,
  });
}

/** For answers without a body. */
export async function requestNothing(path: string, options: RequestOptions): Promise<void> {
  await send(path, options);
}

async function send(path: string, { method = 'GET', body, signal }: RequestOptions): Promise<Response> {
  // Every changing request is JSON, so that no other site's form can make one without being asked first.
  const json = method === 'GET' ? {} : { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body ?? {}) };
  let response: Response;
  try {
    response = await fetch(`/api${path}`, { method, credentials: 'same-origin', ...json, ...(signal === undefined ? {} : { signal }) });
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new ApiError('NETWORK', 'The server cannot be reached. Check the connection and try again.');
  }
  if (!response.ok) throw await readError(response);
  return response;
}

async function readError(response: Response): Promise<ApiError> {
  const parsed = errorBodySchema.safeParse(await response.json().catch(() => undefined));
  if (!parsed.success) {
    return new ApiError('BAD_ANSWER', 'The answer did not come from Evenline. Check the connection and try again.', {
      status: response.status,
    });
  }
  const { code, message, requestId, faults = [] } = parsed.data;
  return new ApiError(code, message, { requestId, status: response.status, faults });
}
