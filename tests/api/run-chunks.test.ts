import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { runChunks } from '#server/db/schema/run-chunks.ts';
import { chainDigest } from '#server/services/runs/chain.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { CHUNK_MAX_BYTES } from '#shared/api/runs.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';
import { chained, headerFor, type Loaded, loadPractice, sealOf, sendAll, shortJournal } from './support/tablet.ts';

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
const storedBytes = async (runId: string) => {
  const rows = await house.connection.db.select().from(runChunks).where(eq(runChunks.runId, runId)).orderBy(runChunks.n);
  return Buffer.concat(rows.map((row) => row.bytes));
};
/** A run announced, nothing sent. */
const announced = async () => {
  const header = headerFor(loaded);
  await person.put(`/api/runs/${header.runId}`, header).expect(201);
  return header;
};

describe('chunks', () => {
  it('come in order, and the server tells where to go on', async () => {
    const header = await announced();
    for (const { n, bytes, digest } of shortJournal(3)) {
      const response = await person.chunk(header.runId, n, bytes, digest).expect(201);
      expect(response.body).toEqual({ runId: header.runId, count: n + 1, head: digest, sealed: false });
      expect(await held(header.runId)).toEqual(response.body);
    }
  });

  it('sent again are found there, whether or not the first answer arrived', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(3);
    await sendAll(person, header, chunks);
    for (const { n, bytes, digest } of chunks) await person.chunk(header.runId, n, bytes, digest).expect(204);
    expect(await held(header.runId)).toMatchObject({ count: 3 });
    expect((await storedBytes(header.runId)).equals(Buffer.concat(chunks.map((chunk) => chunk.bytes)))).toBe(true);
  });

  it('sent many times at once are stored once', async () => {
    const header = await announced();
    const [first] = shortJournal(1);
    const send = () => person.chunk(header.runId, 0, first?.bytes ?? Buffer.alloc(0), first?.digest ?? '');
    const answers = await Promise.all([send(), send(), send(), send(), send()]);
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 204, 204, 204, 204]);
  });

  it('that leave a gap are told which comes next, and nothing changes', async () => {
    const header = await announced();
    const chunks = shortJournal(3);
    const third = chunks[2] as (typeof chunks)[number];
    const response = await person.chunk(header.runId, 2, third.bytes, third.digest).expect(409);
    expect(response.body).toMatchObject({ code: 'SEQUENCE_GAP', expected: 0 });
    expect(await held(header.runId)).toMatchObject({ count: 0, head: ZERO_DIGEST });
  });

  it('of other bytes under a held number are refused, with their own right digest too', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(2);
    await sendAll(person, header, chunks);
    const other = chained([chunks[1]?.bytes ?? Buffer.alloc(0)])[0];
    for (const digest of [other?.digest ?? '', chunks[0]?.digest ?? '']) {
      const response = await person.chunk(header.runId, 0, other?.bytes ?? Buffer.alloc(0), digest).expect(409);
      expect(response.body.code).toBe('DIGEST_MISMATCH');
    }
    expect((await storedBytes(header.runId)).equals(Buffer.concat(chunks.map((chunk) => chunk.bytes)))).toBe(true);
  });

  it('whose digest does not follow from what is held are refused', async () => {
    const header = await announced();
    const [first] = shortJournal(1);
    const bytes = first?.bytes ?? Buffer.alloc(0);
    const response = await person.chunk(header.runId, 0, bytes, chainDigest('11'.repeat(32), bytes)).expect(409);
    expect(response.body.code).toBe('DIGEST_MISMATCH');
  });

  it('with any one byte damaged are refused, even under the damaged bytes’ own digest', async () => {
    const header = await announced();
    const [first] = shortJournal(1);
    const bytes = Buffer.from(first?.bytes ?? []);
    for (let at = 0; at < bytes.length; at += 7) {
      const damaged = Buffer.from(bytes);
      damaged[at] = (damaged[at] ?? 0) ^ (1 << (at % 8));
      const response = await person.chunk(header.runId, 0, damaged, chainDigest(ZERO_DIGEST, damaged));
      expect([response.status, response.body.code, at]).toEqual([422, 'CORRUPT_CHUNK', at]);
    }
    expect(await held(header.runId)).toMatchObject({ count: 0 });
    await person.chunk(header.runId, 0, bytes, first?.digest ?? '').expect(201);
  });

  it('cut short, empty, or with blocks out of order are refused', async () => {
    const header = await announced();
    const [first, second] = shortJournal(2);
    const whole = Buffer.from(first?.bytes ?? []);
    for (const bytes of [whole.subarray(0, whole.length - 1), Buffer.from(second?.bytes ?? []), Buffer.concat([whole, whole])]) {
      const response = await person.chunk(header.runId, 0, bytes, chainDigest(ZERO_DIGEST, bytes)).expect(422);
      expect(response.body.code).toBe('CORRUPT_CHUNK');
    }
    const empty = await person.chunk(header.runId, 0, Buffer.alloc(0), chainDigest(ZERO_DIGEST, Buffer.alloc(0)));
    expect(empty.status).toBeGreaterThanOrEqual(400);
    expect(empty.status).toBeLessThan(500);
    expect(await held(header.runId)).toMatchObject({ count: 0 });
  });

  it('of more than a chunk’s size are refused unread', async () => {
    const header = await announced();
    const bytes = Buffer.alloc(CHUNK_MAX_BYTES + 1);
    expect((await person.chunk(header.runId, 0, bytes, chainDigest(ZERO_DIGEST, bytes)).expect(413)).body.code).toBe('PAYLOAD_TOO_LARGE');
  });

  it('of an unannounced run are refused', async () => {
    const [first] = shortJournal(1);
    const response = await person.chunk(headerFor(loaded).runId, 0, first?.bytes ?? Buffer.alloc(0), first?.digest ?? '').expect(404);
    expect(response.body.code).toBe('RUN_NOT_FOUND');
  });

  it('never change once stored, whoever asks the database', async () => {
    const header = headerFor(loaded);
    await sendAll(person, header, shortJournal(1));
    const change = house.connection.pool.query("update run_chunks set digest = repeat('a', 64) where run_id = $1", [header.runId]);
    await expect(change).rejects.toThrow(/never change/);
  });
});

describe('a seal', () => {
  it('before everything arrived names what is missing', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(3);
    await sendAll(person, header, chunks.slice(0, 2));
    const response = await person.post(`/api/runs/${header.runId}/seal`, sealOf(chunks)).expect(409);
    expect(response.body).toMatchObject({ code: 'SEQUENCE_GAP', expected: 2 });
  });

  it('of another head or fewer chunks is refused', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(2);
    await sendAll(person, header, chunks);
    for (const seal of [{ count: 2, head: ZERO_DIGEST }, sealOf(chunks.slice(0, 1))]) {
      expect((await person.post(`/api/runs/${header.runId}/seal`, seal).expect(409)).body.code).toBe('SEAL_MISMATCH');
    }
    expect(await held(header.runId)).toMatchObject({ sealed: false });
  });

  it('closes the run: the same seal again is the same answer, another is refused, nothing is added', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(3);
    const sealed = chunks.slice(0, 2);
    await sendAll(person, header, sealed);
    const first = await person.post(`/api/runs/${header.runId}/seal`, sealOf(sealed)).expect(202);
    expect(first.body).toMatchObject({ runId: header.runId, head: sealOf(sealed).head });
    await person.post(`/api/runs/${header.runId}/seal`, sealOf(sealed)).expect(202);
    expect((await person.post(`/api/runs/${header.runId}/seal`, sealOf(chunks)).expect(409)).body.code).toBe('SEAL_MISMATCH');
    const late = chunks[2] as (typeof chunks)[number];
    expect((await person.chunk(header.runId, 2, late.bytes, late.digest).expect(409)).body.code).toBe('RUN_SEALED');
    await person.chunk(header.runId, 0, chunks[0]?.bytes ?? Buffer.alloc(0), chunks[0]?.digest ?? '').expect(204);
    await person.put(`/api/runs/${header.runId}`, header).expect(200);
    expect(await held(header.runId)).toMatchObject({ count: 2, sealed: true });
  });
});
