import { eq } from 'drizzle-orm';
import { v4 as uuidv4 } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { runs } from '#server/db/schema/runs.ts';
import { uploadGrants } from '#server/db/schema/upload-grants.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import { asText } from './support/as-text.ts';
import { callerOf } from './support/caller.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';
import { headerFor, type Loaded, loadPractice, sealOf, sendAll, shortJournal } from './support/tablet.ts';

let house: House;
let person: Person;
let loaded: Loaded;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
});
afterAll(() => house.close());

const held = async (runId: string) => (await person.get(`/api/runs/${runId}/chunks`).expect(200)).body;
/** A run announced, nothing sent. */
const announced = async () => {
  const header = headerFor(loaded);
  await person.put(`/api/runs/${header.runId}`, header).expect(201);
  return header;
};

describe('a header', () => {
  it('may be sent again and is the same run', async () => {
    const header = headerFor(loaded);
    const first = await person.put(`/api/runs/${header.runId}`, header).expect(201);
    expect(first.body).toEqual({ runId: header.runId, count: 0, head: ZERO_DIGEST, sealed: false });
    const again = await person.put(`/api/runs/${header.runId}`, header).expect(200);
    expect(again.body).toEqual(first.body);
  });

  it('sent twice at the same moment makes one run', async () => {
    const header = headerFor(loaded);
    const answers = await Promise.all([1, 2, 3, 4].map(() => person.put(`/api/runs/${header.runId}`, header)));
    expect(answers.map((answer) => answer.status).sort()).toEqual([200, 200, 200, 201]);
  });

  it('of another content under the same id changes nothing', async () => {
    const header = await announced();
    const response = await person.put(`/api/runs/${header.runId}`, { ...header, deviceId: 'another-tablet' }).expect(409);
    expect(response.body.code).toBe('RUN_CONFLICT');
    const [row] = await house.connection.db.select().from(runs).where(eq(runs.id, header.runId));
    expect(row?.deviceId).toBe(header.deviceId);
  });

  it('under another id than its own is refused', async () => {
    const header = headerFor(loaded);
    const response = await person.put(`/api/runs/${headerFor(loaded).runId}`, header).expect(400);
    expect(response.body.code).toBe('RUN_ID_MISMATCH');
  });

  it('with a run id of a team one is not in is refused, and that run stays what it was', async () => {
    const header = await announced();
    const stranger = await newManager(house);
    const theirs = await loadPractice(stranger);
    const response = await stranger.put(`/api/runs/${header.runId}`, headerFor(theirs, { runId: header.runId })).expect(409);
    expect(response.body.code).toBe('RUN_ID_TAKEN');
    for (const path of [`/api/runs/${header.runId}`, `/api/runs/${header.runId}/chunks`, `/api/runs/${header.runId}/journal`]) {
      expect((await stranger.get(path).expect(404)).body.code).toBe('RUN_NOT_FOUND');
    }
    const [chunk] = shortJournal(1);
    await stranger.chunk(header.runId, 0, chunk?.bytes ?? Buffer.alloc(0), chunk?.digest ?? '').expect(404);
    expect(await held(header.runId)).toMatchObject({ count: 0 });
  });

  it('with a pack this server never handed out is refused', async () => {
    const pack = { ...loaded.pack, attempt: { ...loaded.pack.attempt, stagedBehindM: 7 } };
    const altered = headerFor(loaded, { pack });
    expect((await person.put(`/api/runs/${altered.runId}`, altered).expect(409)).body.code).toBe('PACK_UNKNOWN');
    const unknown = headerFor(loaded, { packDigest: 'ab'.repeat(32) });
    expect((await person.put(`/api/runs/${unknown.runId}`, unknown).expect(409)).body.code).toBe('PACK_UNKNOWN');
  });

  it('with the pack of another attempt is refused', async () => {
    const stranger = await newManager(house);
    const theirs = await loadPractice(stranger);
    const header = headerFor(loaded, { pack: theirs.pack, packDigest: theirs.digest });
    expect((await person.put(`/api/runs/${header.runId}`, header).expect(409)).body.code).toBe('PACK_UNKNOWN');
  });

  it.each([
    ['an id that is no UUIDv7', { runId: uuidv4() }],
    ['a field nobody knows', { extra: 1 }],
    ['no pack', { pack: null }],
    ['a clock that stands', { clockRate: 0 }],
  ])('with %s is refused', async (_what, change) => {
    const header = { ...headerFor(loaded), ...change };
    const response = await person.put(`/api/runs/${header.runId}`, header).expect(400);
    expect(response.body.code).toBe('INVALID_REQUEST');
  });
});

describe('an upload grant', () => {
  it('carries a run from header to seal with nobody signed in', async () => {
    const tablet = callerOf(house, loaded.grant);
    const header = headerFor(loaded);
    const chunks = shortJournal(2);
    await sendAll(tablet, header, chunks);
    expect((await tablet.get(`/api/runs/${header.runId}/chunks`).expect(200)).body).toMatchObject({ count: 2 });
    await tablet.post(`/api/runs/${header.runId}/seal`, sealOf(chunks)).expect(202);
  });

  it('is stored as its hash only', async () => {
    const rows = await house.connection.db.select().from(uploadGrants);
    expect(rows.length).toBeGreaterThan(0);
    expect(JSON.stringify(rows)).not.toContain(loaded.grant);
  });

  it('opens no other entry', async () => {
    const stranger = await newManager(house);
    const theirs = await loadPractice(stranger);
    const header = headerFor(theirs);
    expect((await callerOf(house, loaded.grant).put(`/api/runs/${header.runId}`, header).expect(404)).body.code).toBe('NOT_FOUND');
  });

  it('ends when it is revoked, when it runs out, and when it is no grant', async () => {
    const someone = await newManager(house);
    const theirs = await loadPractice(someone);
    const tablet = callerOf(house, theirs.grant);
    const first = headerFor(theirs);
    await tablet.put(`/api/runs/${first.runId}`, first).expect(201);
    expect((await someone.post(`/api/entries/${theirs.entryId}/revoke-grants`).expect(200)).body).toEqual({ revoked: 1 });
    expect((await tablet.get(`/api/runs/${first.runId}/chunks`).expect(401)).body.code).toBe('GRANT_INVALID');

    const again = await someone.post(`/api/attempts/${theirs.attemptId}/pack`).expect(200);
    const renewed = callerOf(house, again.body.grant);
    await renewed.get(`/api/runs/${first.runId}/chunks`).expect(200);
    house.advance(31 * 24 * 3600 * 1000);
    expect((await renewed.get(`/api/runs/${first.runId}/chunks`).expect(401)).body.code).toBe('GRANT_INVALID');
    expect((await callerOf(house, 'short').get(`/api/runs/${first.runId}/chunks`).expect(401)).body.code).toBe('GRANT_INVALID');
  });
});

describe('the journal as text', () => {
  it('is what was sent, sealed or not, under a name of its own', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(3);
    await sendAll(person, header, chunks.slice(0, 2));
    const response = await person.get(`/api/runs/${header.runId}/journal`).expect(200).buffer(true).parse(asText);
    expect(response.get('content-disposition')).toBe(`attachment; filename=evenline-${header.runId}.ndjson`);
    const read = fromNdjson(String(response.body));
    if (!read.ok) throw new Error(read.error.message);
    expect(read.value.header).toEqual(header);
    expect(read.value.observations.map((observation) => observation.seq)).toEqual(Array.from({ length: 42 }, (_, i) => i));
    expect(read.value.observations.filter((observation) => observation.type === 'note.v1')).toMatchObject([
      { text: 'chunk 0' },
      { text: 'chunk 1' },
    ]);
  });
});
