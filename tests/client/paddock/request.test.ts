import { afterEach, describe, expect, it, vi } from 'vitest';
import { z } from 'zod';
import { ApiError } from '#src/api/api-error.ts';
import { request } from '#src/api/request.ts';

const schema = z.object({ n: z.number() });
const answer = (status: number, body: unknown) => vi.stubGlobal('fetch', async () => Response.json(body, { status }));

async function failure(): Promise<ApiError> {
  const error: unknown = await request(schema, '/x').catch((caught: unknown) => caught);
  if (!(error instanceof ApiError)) throw new Error('no ApiError');
  return error;
}

afterEach(() => vi.unstubAllGlobals());

describe('request', () => {
  it('gives what the schema knows and tolerates fields of a newer server', async () => {
    answer(200, { n: 1, newer: true });
    expect(await request(schema, '/x')).toEqual({ n: 1 });
  });

  it('sends every change as JSON, even an empty one', async () => {
    const sent: RequestInit[] = [];
    vi.stubGlobal('fetch', async (_url: string, init: RequestInit) => {
      sent.push(init);
      return Response.json({ n: 1 });
    });
    await request(schema, '/x', { method: 'POST' });
    expect(sent[0]).toMatchObject({ method: 'POST', body: '{}', headers: { 'content-type': 'application/json' } });
  });

  it('throws the server’s code, sentence and request number', async () => {
    answer(409, {
      code: 'PACK_NOT_READY',
      message: 'No scale.',
      requestId: 'r-7',
      faults: [{ code: 'x', where: 'wheel', message: 'none' }],
    });
    expect(await failure()).toMatchObject({
      code: 'PACK_NOT_READY',
      message: 'No scale.',
      requestId: 'r-7',
      status: 409,
      faults: [{ where: 'wheel' }],
    });
  });

  it('takes no answer, a foreign page and an unknown form apart', async () => {
    vi.stubGlobal('fetch', async () => {
      throw new TypeError('Failed to fetch');
    });
    expect((await failure()).code).toBe('NETWORK');
    vi.stubGlobal('fetch', async () => new Response('<html>', { status: 511 }));
    expect((await failure()).code).toBe('BAD_ANSWER');
    answer(200, { n: 'one' });
    expect((await failure()).code).toBe('BAD_ANSWER');
  });
});
