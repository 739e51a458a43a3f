import { eq } from 'drizzle-orm';
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { runChunks } from '#server/db/schema/run-chunks.ts';
import { chainDigest } from '#server/services/runs/chain.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';
import { headerFor, type Loaded, loadPractice, sealOf, shortJournal } from './support/tablet.ts';

let house: House;
let person: Person;
let loaded: Loaded;
beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
});
afterAll(() => house.close());

const CHUNKS = shortJournal(5);

/** What a tablet on a bad line may come up with: anything, in any order, any number of times. */
type Call =
  | { readonly kind: 'header' | 'held' }
  | { readonly kind: 'chunk' | 'damaged chunk'; readonly n: number }
  | { readonly kind: 'seal'; readonly count: number };

const n = fc.integer({ min: 0, max: CHUNKS.length - 1 });
const call: fc.Arbitrary<Call> = fc.oneof(
  { weight: 2, arbitrary: fc.record({ kind: fc.constantFrom('header' as const, 'held' as const) }) },
  { weight: 8, arbitrary: fc.record({ kind: fc.constant('chunk' as const), n }) },
  { weight: 2, arbitrary: fc.record({ kind: fc.constant('damaged chunk' as const), n }) },
  { weight: 1, arbitrary: fc.record({ kind: fc.constant('seal' as const), count: fc.integer({ min: 1, max: CHUNKS.length }) }) },
);

/** What the server must hold, in the plainest words. */
interface Model {
  known: boolean;
  count: number;
  sealed: boolean;
}

const answer = ({ status, body }: { readonly status: number; readonly body: { readonly code?: string } }): string =>
  status < 300 ? String(status) : (body.code ?? '');

async function check(runId: string, header: ReturnType<typeof headerFor>, model: Model, act: Call): Promise<void> {
  switch (act.kind) {
    case 'header': {
      expect(answer(await person.put(`/api/runs/${runId}`, header))).toBe(model.known ? '200' : '201');
      model.known = true;
      return;
    }
    case 'held': {
      const response = await person.get(`/api/runs/${runId}/chunks`);
      if (!model.known) return expect(answer(response)).toBe('RUN_NOT_FOUND');
      const head = CHUNKS[model.count - 1]?.digest ?? ZERO_DIGEST;
      return expect(response.body).toEqual({ runId, count: model.count, head, sealed: model.sealed });
    }
    case 'chunk': {
      const { bytes, digest } = CHUNKS[act.n] as (typeof CHUNKS)[number];
      const expected = expectedOfChunk(model, act.n);
      expect(answer(await person.chunk(runId, act.n, bytes, digest))).toBe(expected);
      if (expected === '201') model.count += 1;
      return;
    }
    case 'damaged chunk': {
      const bytes = Buffer.from(CHUNKS[act.n]?.bytes ?? []);
      bytes[bytes.length >> 1] = (bytes[bytes.length >> 1] ?? 0) ^ 1;
      const previous = CHUNKS[act.n - 1]?.digest ?? ZERO_DIGEST;
      const unharmed = expectedOfChunk(model, act.n);
      const expected = unharmed === '204' ? 'DIGEST_MISMATCH' : unharmed === '201' ? 'CORRUPT_CHUNK' : unharmed;
      return expect(answer(await person.chunk(runId, act.n, bytes, chainDigest(previous, bytes)))).toBe(expected);
    }
    case 'seal': {
      const expected = expectedOfSeal(model, act.count);
      expect(answer(await person.post(`/api/runs/${runId}/seal`, sealOf(CHUNKS.slice(0, act.count))))).toBe(expected);
      if (expected === '202') model.sealed = true;
    }
  }
}

function expectedOfChunk(model: Model, at: number): string {
  if (!model.known) return 'RUN_NOT_FOUND';
  if (at < model.count) return '204';
  if (model.sealed) return 'RUN_SEALED';
  return at === model.count ? '201' : 'SEQUENCE_GAP';
}

function expectedOfSeal(model: Model, count: number): string {
  if (!model.known) return 'RUN_NOT_FOUND';
  if (count === model.count) return '202';
  return !model.sealed && count > model.count ? 'SEQUENCE_GAP' : 'SEAL_MISMATCH';
}

describe('any calls in any order', () => {
  it('leave exactly the chunks that came next, once each', { timeout: 60_000 }, async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(call, { minLength: 10, maxLength: 30 }), async (calls) => {
        const header = headerFor(loaded);
        const model: Model = { known: false, count: 0, sealed: false };
        for (const act of calls) await check(header.runId, header, model, act);
        const rows = await house.connection.db.select().from(runChunks).where(eq(runChunks.runId, header.runId)).orderBy(runChunks.n);
        const held = CHUNKS.slice(0, model.count).map((chunk) => Buffer.from(chunk.bytes));
        expect(Buffer.concat(rows.map((row) => row.bytes)).equals(Buffer.concat(held))).toBe(true);
      }),
      { numRuns: 25 },
    );
  });
});
