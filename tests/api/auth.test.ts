import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { ABSOLUTE_MS } from '#server/auth/auth-sessions.ts';
import { authSessions } from '#server/db/schema/auth-sessions.ts';
import { signInFailures } from '#server/db/schema/sign-in-failures.ts';
import { users } from '#server/db/schema/users.ts';
import { sweep } from '#server/services/house/sweep.ts';
import { callerOf } from './support/caller.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, PASSWORD, someEmail } from './support/people.ts';

let house: House;
beforeAll(async () => {
  house = await openHouse();
});
afterAll(() => house.close());

const signUp = { email: 'a@evenline.example', password: PASSWORD, name: 'A', teamName: 'T' };

describe('signing up', () => {
  it('makes a person, a team, and the person its manager', async () => {
    const caller = callerOf(house);
    const response = await caller.post('/api/auth/sign-up', { ...signUp, email: ' New@Evenline.Example ' }).expect(201);
    expect(response.body.user).toMatchObject({ email: 'new@evenline.example', name: 'A' });
    expect(response.body.teams).toEqual([expect.objectContaining({ name: 'T', kind: 'crew', role: 'manager' })]);
    await caller.get('/api/auth/me').expect(200);
  });

  it('keeps neither password nor token, only their hashes', async () => {
    const email = someEmail();
    const response = await callerOf(house)
      .post('/api/auth/sign-up', { ...signUp, email })
      .expect(201);
    const token = /evenline=([^;]+)/.exec(String(response.get('set-cookie')))?.[1] ?? '';
    expect(token).toMatch(/^[A-Za-z0-9_-]{43}$/);
    const stored = JSON.stringify([await house.connection.db.select().from(users), await house.connection.db.select().from(authSessions)]);
    expect(stored).not.toContain(token);
    expect(stored).not.toContain(PASSWORD);
    expect(stored).toContain('$argon2id$v=19$m=65536,t=3,p=1$');
  });

  it('gives a cookie that scripts and other sites cannot use', async () => {
    const response = await callerOf(house)
      .post('/api/auth/sign-up', { ...signUp, email: someEmail() })
      .expect(201);
    expect(String(response.get('set-cookie'))).toMatch(/^evenline=[^;]+; Path=\/; HttpOnly; SameSite=Lax; Max-Age=\d+$/);
  });

  it.each([
    ['password of seven characters', { password: 'seven77' }, 400, 'INVALID_REQUEST'],
    ['password of 257 characters', { password: 'x'.repeat(257) }, 400, 'INVALID_REQUEST'],
    ['password everyone tries', { password: 'PASSWORD1' }, 422, 'PASSWORD_TOO_COMMON'],
    ['password that is the address', { email: 'same@evenline.example', password: 'same@evenline.example' }, 422, 'PASSWORD_TOO_COMMON'],
    ['address that is none', { email: 'nobody' }, 400, 'INVALID_REQUEST'],
    ['field nobody asked for', { role: 'manager' }, 400, 'INVALID_REQUEST'],
    ['name with a NUL', { name: 'A\u0000B' }, 400, 'INVALID_REQUEST'],
    ['empty team name', { teamName: '  ' }, 400, 'INVALID_REQUEST'],
  ])('refuses a %s', async (_what, change, status, code) => {
    const response = await callerOf(house)
      .post('/api/auth/sign-up', { ...signUp, email: someEmail(), ...change })
      .expect(status);
    expect(response.body).toMatchObject({ code, message: expect.stringMatching(/./), requestId: expect.stringMatching(/^[0-9a-f-]{36}$/) });
  });

  it('takes a long password with spaces and other scripts', async () => {
    const email = someEmail();
    const password = `größe ${'長い '.repeat(40)}`.trim();
    await callerOf(house)
      .post('/api/auth/sign-up', { ...signUp, email, password })
      .expect(201);
    await callerOf(house).post('/api/auth/sign-in', { email, password }).expect(200);
  });

  it('refuses a second account with one address, sent at the same moment too', async () => {
    const email = someEmail();
    const answers = await Promise.all([1, 2].map(() => callerOf(house).post('/api/auth/sign-up', { ...signUp, email })));
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 409]);
    expect(answers.find((answer) => answer.status === 409)?.body.code).toBe('EMAIL_TAKEN');
  });
});

describe('signing in and out', () => {
  it('ends the sign-in on the server, not only in the browser', async () => {
    const person = await newManager(house);
    const response = await person.post('/api/auth/sign-in', { email: person.email, password: PASSWORD }).expect(200);
    const cookie = String(response.get('set-cookie')).split(';')[0] ?? '';
    await callerOf(house).get('/api/auth/me').set('cookie', cookie).expect(200);
    await person.post('/api/auth/sign-out').expect(204);
    const after = await callerOf(house).get('/api/auth/me').set('cookie', cookie).expect(401);
    expect(after.body.code).toBe('SIGN_IN_REQUIRED');
  });

  it('gives a new token at each sign-in and ends the one it replaces', async () => {
    const person = await newManager(house);
    const first = await person.post('/api/auth/sign-in', { email: person.email, password: PASSWORD });
    const second = await person.post('/api/auth/sign-in', { email: person.email, password: PASSWORD });
    const [old, fresh] = [first, second].map((response) => String(response.get('set-cookie')).split(';')[0] ?? '');
    expect(old).not.toBe(fresh);
    await callerOf(house)
      .get('/api/auth/me')
      .set('cookie', old ?? '')
      .expect(401);
    await callerOf(house)
      .get('/api/auth/me')
      .set('cookie', fresh ?? '')
      .expect(200);
  });

  it('answers an unknown address and a wrong password alike', async () => {
    const person = await newManager(house);
    const wrong = await callerOf(house).post('/api/auth/sign-in', { email: person.email, password: 'not the password' }).expect(401);
    const unknown = await callerOf(house).post('/api/auth/sign-in', { email: someEmail(), password: 'not the password' }).expect(401);
    expect({ ...wrong.body, requestId: '' }).toEqual({ ...unknown.body, requestId: '' });
    expect(wrong.get('set-cookie')).toBeUndefined();
  });

  it('ends at the absolute limit however much it was used', async () => {
    const person = await newManager(house);
    await person.get('/api/auth/me').expect(200);
    const limit = new Date(Date.now() + ABSOLUTE_MS).getTime();
    const [row] = await house.connection.db
      .select({ at: authSessions.absoluteExpiresAt })
      .from(authSessions)
      .where(sql`${authSessions.userId} = ${person.userId}`);
    expect(Math.abs((row?.at.getTime() ?? 0) - limit)).toBeLessThan(60_000);
    await house.connection.db
      .update(authSessions)
      .set({ absoluteExpiresAt: new Date(Date.now() - 1) })
      .where(sql`${authSessions.userId} = ${person.userId}`);
    await person.get('/api/auth/me').expect(401);
  });
});

describe('failed sign-ins', () => {
  const fail = (email: string) => callerOf(house).post('/api/auth/sign-in', { email, password: 'not the password' });

  it('are limited to five in a quarter of an hour for one account and address, and say how long to wait', async () => {
    const person = await newManager(house);
    for (let i = 0; i < 5; i++) await fail(person.email).expect(401);
    const sixth = await fail(person.email).expect(429);
    expect(sixth.body.code).toBe('TOO_MANY_ATTEMPTS');
    expect(Number(sixth.get('retry-after'))).toBeGreaterThan(14 * 60);
    const right = { email: person.email, password: PASSWORD };
    await callerOf(house).post('/api/auth/sign-in', right).expect(429);
    house.advance(15 * 60_000 + 1000);
    await callerOf(house).post('/api/auth/sign-in', right).expect(200);
  });

  it('are counted for unknown addresses alike', async () => {
    const email = someEmail();
    for (let i = 0; i < 5; i++) await fail(email).expect(401);
    await fail(email).expect(429);
  });

  it('do not slip under the limit when sent at once', async () => {
    const person = await newManager(house);
    const answers = await Promise.all(Array.from({ length: 12 }, () => fail(person.email)));
    expect(answers.filter((answer) => answer.status === 401)).toHaveLength(5);
    expect(answers.filter((answer) => answer.status === 429)).toHaveLength(7);
  });

  it('of one account do not lock another, and a success starts afresh', async () => {
    const [one, other] = [await newManager(house), await newManager(house)];
    for (let i = 0; i < 4; i++) await fail(one.email).expect(401);
    await callerOf(house).post('/api/auth/sign-in', { email: other.email, password: PASSWORD }).expect(200);
    await callerOf(house).post('/api/auth/sign-in', { email: one.email, password: PASSWORD }).expect(200);
    for (let i = 0; i < 5; i++) await fail(one.email).expect(401);
  });

  it('of one address are limited over all accounts, and forgotten after an hour', async () => {
    const own = await openHouse();
    try {
      const person = await newManager(own);
      const failedAt = new Date();
      const row = (i: number) => ({ accountKey: `account ${i}`, address: '127.0.0.1', failedAt });
      await own.connection.db.insert(signInFailures).values(Array.from({ length: 300 }, (_, i) => row(i)));
      const right = { email: person.email, password: PASSWORD };
      await callerOf(own).post('/api/auth/sign-in', right).expect(429);
      own.advance(61 * 60_000);
      await callerOf(own).post('/api/auth/sign-in', right).expect(200);
      await sweep(own.deps);
      expect(await own.connection.db.select().from(signInFailures)).toEqual([]);
    } finally {
      await own.close();
    }
  });
});
