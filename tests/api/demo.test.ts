import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createReplayThread } from '#server/jobs/replay-thread.ts';
import { DEMO_PASSWORD } from '#server/services/demo/demo-cast.ts';
import { demoNotes, seedDemo } from '#server/services/demo/seed-demo.ts';
import { meResponseSchema } from '#shared/api/auth.ts';
import { eventsResponseSchema } from '#shared/api/events.ts';
import { packResponseSchema } from '#shared/api/pack.ts';
import { type RunResponse, runResponseSchema, runsResponseSchema } from '#shared/api/runs.ts';
import { garageResponseSchema } from '#shared/api/teams.ts';
import { canonicalJson } from '#shared/canonical-json.ts';
import { callerOf } from './support/caller.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager } from './support/people.ts';

const TABLES = 'select table_name as name from information_schema.tables where table_schema = $1 and table_type = $2 order by 1';

let house: House;
const thread = createReplayThread();
const seed = () => seedDemo(house.deps, { replay: thread.replay, appVersion: '0.0.0-test' });

beforeAll(async () => {
  house = await openHouse({ patient: true });
  expect(await seed()).toBe(true);
}, 120_000);
afterAll(async () => {
  await thread.close();
  await house.close();
});

async function signedIn(key: string) {
  const caller = callerOf(house);
  const response = await caller.post('/api/auth/sign-in', { email: `${key}@evenline.example`, password: DEMO_PASSWORD }).expect(200);
  const me = meResponseSchema.parse(response.body);
  return { ...caller, teamId: me.teams[0]?.id ?? '', role: me.teams[0]?.role };
}

async function counts(): Promise<Record<string, string>> {
  const { rows } = await house.connection.pool.query<{ name: string }>(TABLES, ['public', 'BASE TABLE']);
  const count = async (name: string) =>
    (await house.connection.pool.query<{ n: string }>(`select count(*) as n from "${name}"`)).rows[0]?.n ?? '';
  const entries: [string, string][] = [];
  for (const { name } of rows) if (name !== 'auth_sessions' && name !== 'sign_in_failures') entries.push([name, await count(name)]);
  return Object.fromEntries(entries);
}

describe('the demo', () => {
  it('fills every table that a page shows', async () => {
    const empty = Object.entries(await counts()).filter(([, n]) => n === '0');
    // Crew zones are the crew's own choice, and this crew made none.
    expect(empty.map(([name]) => name)).toEqual(['crew_zones']);
  });

  it('seeded again changes nothing', async () => {
    const before = await counts();
    expect(await seed()).toBe(false);
    expect(await counts()).toEqual(before);
  });

  it('leaves a database with people in it alone', async () => {
    const other = await openHouse();
    try {
      await newManager(other);
      expect(await seedDemo(other.deps, { replay: thread.replay, appVersion: '0.0.0-test' })).toBe(false);
      expect(await demoNotes(other.deps)).toBeNull();
    } finally {
      await other.close();
    }
  });

  it('names its accounts, and each can sign in as what it says', async () => {
    const notes = (await demoNotes(house.deps)) ?? '';
    expect(notes).toContain(DEMO_PASSWORD);
    for (const role of ['manager', 'navigator', 'driver', 'crew']) {
      expect(notes).toContain(`${role}@evenline.example`);
      expect((await signedIn(role)).role).toBe(role);
    }
    await signedIn('organiser');
  });

  it('has yesterday driven, tomorrow ready to load, and one counting run an attempt that was driven', async () => {
    const navigator = await signedIn('navigator');
    const { events, nowMs, cautions } = eventsResponseSchema.parse(
      (await navigator.get(`/api/teams/${navigator.teamId}/events`).expect(200)).body,
    );
    expect(cautions.length).toBeGreaterThan(0);
    const attempts = events.flatMap((event) => event.entries).flatMap((entry) => entry.attempts);
    expect(attempts).toHaveLength(8);
    for (const attempt of attempts) {
      expect(attempt).toMatchObject({
        packFault: null,
        packDigest: expect.stringMatching(/^[0-9a-f]{64}$/),
        courseBook: { lengthM: 61_000 },
      });
      const driven = attempt.number <= 2;
      expect((attempt.releaseMs ?? 0) < nowMs).toBe(driven);
      expect(attempt.countingRunId !== null).toBe(driven);
      expect(attempt.runs.every((run) => run.status === 'ready')).toBe(true);
    }
  });

  it('has packs with a surveyed road, learnt leads and the place of seat and aerial, small enough for a slow line', async () => {
    const navigator = await signedIn('navigator');
    const { events } = eventsResponseSchema.parse((await navigator.get(`/api/teams/${navigator.teamId}/events`).expect(200)).body);
    const entries = events.flatMap((event) => event.entries);
    const packs = await Promise.all(
      entries.map(async ({ attempts: [first] }) => {
        const response = await navigator.post(`/api/attempts/${first?.id}/pack`).expect(200);
        return packResponseSchema.parse(response.body).pack;
      }),
    );
    expect(packs.map(({ settings }) => settings.scaleRule).sort()).toEqual(['estimator', 'ratio']);
    expect(packs.map(({ wheel }) => wheel.driven ?? false).sort()).toEqual([false, true]);
    for (const pack of packs) {
      expect(pack.settings.tapLeadSigmaMs).toEqual({ glass: 60, wired: 60 });
      expect(pack.car.behindNose).toEqual({ seatM: 2.1, aerialM: 1.6 });
      expect(Buffer.byteLength(canonicalJson(pack))).toBeLessThan(400_000);
      const distances = pack.courseBook.geometry?.map(({ d }) => d) ?? [];
      expect([distances[0], distances.at(-1)]).toEqual([expect.closeTo(-200, 9), expect.closeTo(62_600, 9)]);
      for (const [i, d] of distances.slice(1).entries()) expect(d - (distances[i] ?? 0)).toBe(50);
    }
  });

  it('has finished runs with taps that scatter, a missed place, and a red flag with its rerun', async () => {
    const navigator = await signedIn('navigator2');
    const { runs: list } = runsResponseSchema.parse((await navigator.get(`/api/teams/${navigator.teamId}/runs`).expect(200)).body);
    const runs = await Promise.all(
      list.map(async ({ id }) => runResponseSchema.parse((await navigator.get(`/api/runs/${id}`).expect(200)).body)),
    );
    const sheets = runs.map((run: RunResponse) => run.sheet);
    expect(sheets.filter((sheet) => sheet?.outcome === 'finished')).toHaveLength(4);
    expect(sheets.filter((sheet) => sheet?.outcome === 'rerun')).toHaveLength(1);
    for (const sheet of sheets.filter((one) => one?.outcome === 'finished')) {
      expect(Math.abs(sheet?.finish?.timeErrorS ?? 99)).toBeLessThan(2);
      expect(sheet?.shown?.agrees).toBe(true);
      const off = (sheet?.taps ?? []).map((tap) => tap.figures?.misfitM ?? 0);
      expect(new Set(off.map((metres) => metres.toFixed(2))).size).toBe(off.length);
    }
    const passedUntouched = sheets
      .flatMap((sheet) => sheet?.legs ?? [])
      .filter((leg) => leg.by === 'distance' && ['scale', 'settle', 'place'].includes(leg.duty));
    expect(passedUntouched.map((leg) => leg.checkpointId)).toEqual(['own-chapel']);
  });

  it('has wheel scales with a history from tyre size, measured distance and run', async () => {
    const navigator = await signedIn('navigator');
    const { cars } = garageResponseSchema.parse((await navigator.get(`/api/teams/${navigator.teamId}/garage`).expect(200)).body);
    expect(cars).toHaveLength(2);
    for (const car of cars)
      expect(car.wheelSetups[0]?.scales.map((scale) => scale.source)).toEqual(['run', 'measured distance', 'nominal']);
  });

  it('shows the organiser the start list, and nothing that is private to a crew', async () => {
    const organiser = await signedIn('organiser');
    const { events } = eventsResponseSchema.parse((await organiser.get(`/api/teams/${organiser.teamId}/events`).expect(200)).body);
    const entries = events.flatMap((event) => event.entries);
    expect(entries.map((entry) => entry.number).sort()).toEqual(['12', '7']);
    for (const entry of entries) {
      expect(entry.mayPrepare).toBe(false);
      for (const attempt of entry.attempts)
        expect(attempt).toMatchObject({ packDigest: null, ownCheckpoints: 0, countingRunId: null, runs: [] });
    }
  });
});
