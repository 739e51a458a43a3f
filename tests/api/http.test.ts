import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import supertest from 'supertest';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#server/routes/all-routes.ts';
import { JSON_MAX_BYTES } from '#server/routes/read-json.ts';
import { callerOf } from './support/caller.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, PASSWORD } from './support/people.ts';

let house: House;
let dist: string;
beforeAll(async () => {
  dist = await mkdtemp(join(tmpdir(), 'evenline-dist-'));
  await mkdir(join(dist, 'assets'));
  await writeFile(join(dist, 'index.html'), '<!doctype html><title>Evenline</title>');
  await writeFile(join(dist, 'sw.js'), '// worker');
  await writeFile(join(dist, 'assets', 'main-abc123.js'), '// main');
  house = await openHouse({ dist });
});
afterAll(async () => {
  await house.close();
  await rm(dist, { recursive: true });
});

const raw = () => supertest(house.origin);
const fill = (path: string): string => path.replace(/:n\b/, '0').replace(/:\w+/g, '018f0000-0000-7000-8000-000000000000');

describe('requests that change something', () => {
  const changing = ALL_ROUTES.filter((route) => route.method !== 'get');

  it.each(changing.map((route) => [route.method, route.path] as const))('%s %s is refused from another origin', async (method, path) => {
    const send = () =>
      raw()
        [method](`/api${fill(path)}`)
        .type('application/json');
    for (const headers of [
      { origin: 'https://elsewhere.example' },
      { 'sec-fetch-site': 'cross-site' },
      { 'sec-fetch-site': 'same-site' },
      { origin: 'null' },
      {},
    ]) {
      const response = await send().set(headers).send({}).expect(403);
      expect(response.body.code).toBe('CROSS_ORIGIN');
    }
  });

  it('is refused from a foreign name that points at this machine', async () => {
    const response = await raw()
      .post('/api/auth/sign-out')
      .set({ host: 'elsewhere.example', origin: 'http://elsewhere.example' })
      .type('application/json')
      .send({});
    expect(response.body.code).toBe('CROSS_ORIGIN');
  });

  it.each(['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data'])(
    'is refused as %s, which a form can send',
    async (type) => {
      const response = await raw().post('/api/auth/sign-out').set('origin', house.origin).type(type).send('a=b').expect(415);
      expect(response.body.code).toBe('UNSUPPORTED_CONTENT_TYPE');
    },
  );

  it('is taken from this origin', async () => {
    await raw().post('/api/auth/sign-out').set('origin', house.origin).type('application/json').send({}).expect(204);
  });
});

describe('bodies nobody honest sends', () => {
  const send = (body: string, type = 'application/json') =>
    raw().post('/api/auth/sign-in').set('origin', house.origin).type(type).send(body);

  it.each([
    ['broken JSON', '{"email":', 400],
    ['a planted prototype', '{"__proto__":{"a":1},"email":"a@evenline.example","password":"x"}', 400],
    ['a million levels', '['.repeat(400_000), 400],
    ['more than the limit', `{"email":"${'x'.repeat(JSON_MAX_BYTES)}"}`, 413],
    ['half a character', '{"email":"\\ud800@evenline.example","password":"x"}', 400],
    ['a bare text', '"hello"', 400],
  ])('%s', async (_what, body, status) => {
    const response = await send(body).expect(status);
    expect(response.body).toMatchObject({ code: expect.stringMatching(/^[A-Z_]+$/), requestId: response.get('x-request-id') });
  });

  it('a compressed body', async () => {
    const response = await send('{}').set('content-encoding', 'gzip').expect(415);
    expect(response.body.code).toBe('UNSUPPORTED_CONTENT_TYPE');
  });
});

describe('answers', () => {
  it('of the API are never stored and carry a request id', async () => {
    const response = await raw().get('/api/health').expect(200);
    expect(response.body).toMatchObject({ status: 'ok' });
    expect(response.get('cache-control')).toBe('no-store');
    expect(response.get('x-request-id')).toMatch(/^[0-9a-f-]{36}$/);
    expect(response.get('x-powered-by')).toBeUndefined();
  });

  it('carry a policy without inline scripts, and allow the sensors', async () => {
    const response = await raw().get('/').expect(200);
    const policy = new Map(
      (response.get('content-security-policy') ?? '').split(';').map((part) => {
        const [name, ...values] = part.trim().split(' ');
        return [name, values.join(' ')];
      }),
    );
    expect(policy.get('default-src')).toBe("'self'");
    expect(policy.get('worker-src')).toBe("'self'");
    expect(policy.get('img-src')).toBe("'self' data: blob:");
    for (const name of ['object-src', 'base-uri', 'frame-ancestors']) expect(policy.get(name)).toBe("'none'");
    expect([...policy.values()].join(' ')).not.toMatch(/unsafe/);
    expect(policy.has('upgrade-insecure-requests')).toBe(false);
    expect(response.get('permissions-policy')).toContain('serial=(self), geolocation=(self), screen-wake-lock=(self)');
    expect(response.get('strict-transport-security')).toBeUndefined();
    expect(response.get('x-content-type-options')).toBe('nosniff');
  });

  it('are 404 in the one shape where there is nothing', async () => {
    for (const path of ['/api', '/api/nothing', '/api/runs/not-an-id', '/assets/main-gone.js']) {
      const response = await callerOf(house).get(path);
      expect([401, 404]).toContain(response.status);
      expect(response.type).toBe('application/json');
    }
  });

  it('of the clock lie between question and answer', async () => {
    const t1 = Date.now();
    const { body } = await raw().get('/api/time').expect(200);
    const t4 = Date.now();
    expect(body.t2).toBeGreaterThanOrEqual(t1);
    expect(body.t3).toBeGreaterThanOrEqual(body.t2);
    expect(body.t3).toBeLessThanOrEqual(t4);
  });
});

describe('the built application', () => {
  it('keeps hashed files for ever and asks for the others anew', async () => {
    expect((await raw().get('/assets/main-abc123.js').expect(200)).get('cache-control')).toBe('public, max-age=31536000, immutable');
    for (const path of ['/', '/index.html', '/sw.js']) expect((await raw().get(path).expect(200)).get('cache-control')).toBe('no-cache');
  });

  it('answers its own addresses with the page, and a missing script not', async () => {
    expect((await raw().get('/runs/123').expect(200)).text).toContain('<title>Evenline</title>');
    await raw().get('/assets/main-gone.js').expect(404);
    await raw().post('/runs/123').set('origin', house.origin).type('application/json').send({}).expect(404);
  });
});

describe('behind TLS', () => {
  it('the cookie is bound to the host, and the browser told to stay with TLS', async () => {
    const secure = await openHouse({ settings: { PUBLIC_ORIGIN: 'https://pace.example', TRUST_PROXY: '1' } });
    try {
      const response = await supertest(secure.origin)
        .post('/api/auth/sign-up')
        .set('origin', 'https://pace.example')
        .send({ email: 'tls@evenline.example', password: PASSWORD, name: 'A', teamName: 'T' })
        .expect(201);
      expect(String(response.get('set-cookie'))).toMatch(/^__Host-evenline=[^;]+; Path=\/; HttpOnly; SameSite=Lax; Max-Age=\d+; Secure$/);
      expect(response.get('strict-transport-security')).toBe('max-age=31536000');
      await supertest(secure.origin).post('/api/auth/sign-out').set('origin', secure.origin).send({}).expect(403);
    } finally {
      await secure.close();
    }
  });
});

describe('a pool with nothing free', () => {
  it('answers busy within seconds, and recovers', { timeout: 20_000 }, async () => {
    const small = await openHouse({ poolMax: 1 });
    try {
      const person = await newManager(small);
      const held = await small.connection.pool.connect();
      const begun = performance.now();
      const response = await person.get('/api/auth/me').expect(503);
      expect(performance.now() - begun).toBeLessThan(7000);
      expect(response.body.code).toBe('BUSY');
      expect(Number(response.get('retry-after'))).toBeGreaterThan(0);
      held.release();
      await person.get('/api/auth/me').expect(200);
    } finally {
      await small.close();
    }
  });
});
