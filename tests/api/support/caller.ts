import supertest from 'supertest';
import { DIGEST_HEADER } from '#shared/api/runs.ts';
import type { House } from './house.ts';

/** Somebody at a browser or a tablet: keeps cookies, sends what a browser sends. */
export interface Caller {
  get(path: string): supertest.Test;
  post(path: string, body?: object): supertest.Test;
  put(path: string, body: object): supertest.Test;
  patch(path: string, body: object): supertest.Test;
  chunk(runId: string, n: number, bytes: Uint8Array, digest: string): supertest.Test;
}

export function callerOf(house: Pick<House, 'origin'>, grant: string | null = null): Caller {
  const agent = supertest.agent(house.origin);
  const dress = (test: supertest.Test): supertest.Test => {
    test.set('origin', house.origin).set('sec-fetch-site', 'same-origin');
    return grant === null ? test : test.set('authorization', `Bearer ${grant}`);
  };
  const withBody = (test: supertest.Test, body: object): supertest.Test => dress(test).type('application/json').send(body);
  return {
    get: (path) => dress(agent.get(path)),
    post: (path, body = {}) => withBody(agent.post(path), body),
    put: (path, body) => withBody(agent.put(path), body),
    patch: (path, body) => withBody(agent.patch(path), body),
    chunk: (runId, n, bytes, digest) =>
      dress(agent.put(`/api/runs/${runId}/chunks/${n}`))
        .type('application/octet-stream')
        .set(DIGEST_HEADER, digest)
        .send(Buffer.from(bytes)),
  };
}
