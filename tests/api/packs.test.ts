import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { sha256Hex } from '#server/auth/tokens.ts';
import { cars } from '#server/db/schema/cars.ts';
import { ownCheckpoints } from '#server/db/schema/own-checkpoints.ts';
import { packs } from '#server/db/schema/packs.ts';
import { wheelScales } from '#server/db/schema/wheel-scales.ts';
import { wheelSetups } from '#server/db/schema/wheel-setups.ts';
import { eventsResponseSchema } from '#shared/api/events.ts';
import { packResponseSchema, packSchema } from '#shared/api/pack.ts';
import { canonicalJson } from '#shared/canonical-json.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';
import { type Loaded, loadPractice } from './support/tablet.ts';

let house: House;
let person: Person;
let loaded: Loaded;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
});
afterAll(() => house.close());

const load = async () => packResponseSchema.parse((await person.post(`/api/attempts/${loaded.attemptId}/pack`).expect(200)).body);
const currentDigest = async () => {
  const { events } = eventsResponseSchema.parse((await person.get(`/api/teams/${person.teamId}/events`).expect(200)).body);
  return events[0]?.entries[0]?.attempts[0]?.packDigest;
};

describe('a pack', () => {
  it('is named by the SHA-256 of its canonical JSON, which is what is kept', async () => {
    expect(sha256Hex(canonicalJson(loaded.pack))).toBe(loaded.digest);
    const [row] = await house.connection.db.select().from(packs).where(eq(packs.digest, loaded.digest));
    expect(row?.canonical).toBe(canonicalJson(loaded.pack));
    expect(packSchema.parse(JSON.parse(row?.canonical ?? ''))).toEqual(loaded.pack);
  });

  it('of unchanged rows has the same digest each time, and a new grant', async () => {
    const again = await load();
    expect(again.digest).toBe(loaded.digest);
    expect(again.grant).not.toBe(loaded.grant);
    expect(await currentDigest()).toBe(loaded.digest);
  });

  it('changes with the release, and comes back with it', async () => {
    const releaseMs = Date.UTC(2026, 5, 6, 14, 30);
    const answer = await person.patch(`/api/attempts/${loaded.attemptId}`, { releaseMs }).expect(200);
    expect(answer.body).toEqual({ id: loaded.attemptId, releaseMs });
    const released = await load();
    expect(released.digest).not.toBe(loaded.digest);
    expect(released.pack).toEqual({ ...loaded.pack, attempt: { ...loaded.pack.attempt, releaseMs } });
    expect(await currentDigest()).toBe(released.digest);
    await person.patch(`/api/attempts/${loaded.attemptId}`, { releaseMs: null }).expect(200);
    expect((await load()).digest).toBe(loaded.digest);
  });

  it('says where seat and aerial are and what turns which wheel once that is known, and nothing of it before', async () => {
    expect(loaded.pack.car).not.toHaveProperty('behindNose');
    expect(loaded.pack.wheel).not.toHaveProperty('driven');
    expect(loaded.pack.wheel).not.toHaveProperty('secondChannel');
    const { db } = house.connection;
    const car = eq(cars.id, loaded.pack.car.id);
    const setup = eq(wheelSetups.id, loaded.pack.wheel.setupId);
    await db.update(cars).set({ seatBehindNoseM: 2.1, aerialBehindNoseM: 0 }).where(car);
    await db.update(wheelSetups).set({ driven: true, secondChannel: 3 }).where(setup);
    const { pack } = await load();
    expect(pack.car).toEqual({ ...loaded.pack.car, behindNose: { seatM: 2.1, aerialM: 0 } });
    expect(pack.wheel).toEqual({ ...loaded.pack.wheel, driven: true, secondChannel: 3 });
    await db.update(cars).set({ seatBehindNoseM: null, aerialBehindNoseM: null }).where(car);
    await db.update(wheelSetups).set({ driven: false, secondChannel: null }).where(setup);
    expect((await load()).digest).toBe(loaded.digest);
  });

  it('carries the newest wheel scale and the team’s own places in order of distance', async () => {
    const { db } = house.connection;
    const wheelSetupId = loaded.pack.wheel.setupId;
    await db.insert(wheelScales).values({ wheelSetupId, mmPerPulse: 83.1234, scaleSigma: 0.002, source: 'measured distance' });
    const place = (placeId: string, atText: string) => ({ placeId, atText, name: placeId, duty: 'scale' as const, atUnit: 'km' as const });
    const own = { teamId: person.teamId, courseBookId: loaded.pack.courseBook.id };
    await db.insert(ownCheckpoints).values([
      { ...own, ...place('own-b', '14.2') },
      { ...own, ...place('own-a', '9.75') },
    ]);
    const { pack } = await load();
    expect(pack.wheel).toMatchObject({ mmPerPulse: 83.1234, scaleSource: 'measured distance' });
    expect(pack.ownCheckpoints.map((checkpoint) => [checkpoint.id, checkpoint.at.text, checkpoint.source])).toEqual([
      ['own-a', '9.75', 'own'],
      ['own-b', '14.2', 'own'],
    ]);
  });

  it('never carries another team’s places over the same book', async () => {
    const stranger = await newManager(house);
    await house.connection.db.insert(ownCheckpoints).values({
      teamId: stranger.teamId,
      courseBookId: loaded.pack.courseBook.id,
      placeId: 'secret',
      name: 'Their secret',
      duty: 'scale',
      atText: '3.3',
      atUnit: 'km',
    });
    expect(JSON.stringify((await load()).pack)).not.toContain('Their secret');
  });

  it('that cannot be made says why, here and on the event page', async () => {
    await house.connection.db.insert(ownCheckpoints).values({
      teamId: person.teamId,
      courseBookId: loaded.pack.courseBook.id,
      placeId: 'barn',
      name: 'Barn again',
      duty: 'scale',
      atText: '5',
      atUnit: 'km',
    });
    const response = await person.post(`/api/attempts/${loaded.attemptId}/pack`).expect(409);
    expect(response.body).toMatchObject({ code: 'PACK_NOT_READY', faults: [{ code: 'DUPLICATE_ID', where: 'ownCheckpoints' }] });
    const { events } = eventsResponseSchema.parse((await person.get(`/api/teams/${person.teamId}/events`).expect(200)).body);
    expect(events[0]?.entries[0]?.attempts[0]).toMatchObject({ packDigest: null, packFault: expect.stringContaining('barn') });
  });

  it('never changes once kept, and no digest but its own names it', async () => {
    const { pool } = house.connection;
    await expect(pool.query("update packs set canonical = '{}' where digest = $1", [loaded.digest])).rejects.toThrow(/never change/);
    await expect(pool.query('delete from packs where digest = $1', [loaded.digest])).rejects.toThrow(/never change/);
    const wrong = pool.query("insert into packs (digest, canonical, attempt_id) values (repeat('a', 64), '{}', $1)", [loaded.attemptId]);
    await expect(wrong).rejects.toThrow(/packs_digest_of_canonical/);
  });
});
