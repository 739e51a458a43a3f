import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { checkpointRecords } from '#server/db/schema/checkpoint-records.ts';
import { runResults } from '#server/db/schema/run-results.ts';
import { runs } from '#server/db/schema/runs.ts';
import { driveRun } from '#server/services/demo/drive-run.ts';
import { outdatedRuns } from '#server/services/runs/outdated-runs.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { runSheetSchema } from '#shared/api/run-sheet.ts';
import { type RunResponse, runResponseSchema, runsResponseSchema } from '#shared/api/runs.ts';
import { decodeBlocks, encodeBlock } from '#shared/journal/block.ts';
import { crc32 } from '#shared/journal/crc32.ts';
import { replay } from '#shared/journal/replay.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import { ENGINE_VERSION } from '#shared/pace/run.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { type House, openHouse } from './support/house.ts';
import { newManager, type Person } from './support/people.ts';
import { chained, headerFor, type Loaded, loadPractice, type SentChunk, sealOf, sendAll, shortJournal } from './support/tablet.ts';
import { until } from './support/until.ts';

let house: House;
let person: Person;
let loaded: Loaded;
/** A whole simulated drive, sealed through the wire. */
let driven: { readonly header: RunHeader; readonly chunks: readonly SentChunk[] };

const seal = (header: RunHeader, chunks: readonly SentChunk[]) => person.post(`/api/runs/${header.runId}/seal`, sealOf(chunks)).expect(202);
const settled = (runId: string): Promise<RunResponse> =>
  until(async () => {
    const run = runResponseSchema.parse((await person.get(`/api/runs/${runId}`).expect(200)).body);
    return run.run.status === 'computing' ? null : run;
  });

const announceAndSeal = async (chunks: readonly SentChunk[], changes: Partial<RunHeader> = {}) => {
  const header = headerFor(loaded, changes);
  await sendAll(person, header, chunks);
  await seal(header, chunks);
  return { header, chunks };
};

beforeAll(async () => {
  house = await openHouse();
  person = await newManager(house);
  loaded = await loadPractice(person);
  const header = headerFor(loaded);
  const chunks = chained(
    driveRun({ pack: loaded.pack, seed: 7, releaseMs: Date.UTC(2026, 4, 9, 10, 0), forgets: 'mast', redFlagAfterS: null }),
  );
  await sendAll(person, header, chunks);
  await seal(header, chunks);
  driven = { header, chunks };
});
afterAll(() => house.close());

describe('a sealed run', () => {
  it('has the run sheet that the same journal gives anywhere else', async () => {
    const { sheet, run, result, failure, held } = await settled(driven.header.runId);
    expect(run).toMatchObject({ status: 'ready', outcome: 'finished', counts: false });
    expect(failure).toBeNull();
    const observations = driven.chunks.flatMap(({ bytes }) => {
      const blocks = decodeBlocks(bytes);
      if (!blocks.ok) throw new Error(blocks.error.message);
      return blocks.value.flatMap((block) => block.observations);
    });
    const here = runSheet(replay(driven.header, observations), driven.header);
    expect(sheet).toEqual(runSheetSchema.parse(JSON.parse(JSON.stringify(here))));
    expect(sheet?.finish?.elapsedS).toBeGreaterThan(590);
    expect(sheet?.shown?.agrees).toBe(true);
    expect(sheet?.legs.find((leg) => leg.checkpointId === 'mast')?.by).toBe('distance');
    expect(result).toMatchObject({ engine: ENGINE_VERSION, packDigest: loaded.digest, journalHead: held.head, amendmentHead: ZERO_DIGEST });
  });

  it('has a row for each checkpoint', async () => {
    const { sheet } = await settled(driven.header.runId);
    const rows = await house.connection.db
      .select({ id: checkpointRecords.checkpointId, by: checkpointRecords.passedBy, late: checkpointRecords.timeErrorS })
      .from(checkpointRecords)
      .innerJoin(runResults, eq(runResults.id, checkpointRecords.resultId))
      .where(eq(runResults.runId, driven.header.runId))
      .orderBy(checkpointRecords.position);
    expect(rows).toEqual(sheet?.legs.map((leg) => ({ id: leg.checkpointId, by: leg.by, late: leg.timeErrorS })));
  });

  it('is listed with its finish, and may be named the one that counts', async () => {
    await settled(driven.header.runId);
    await person.post(`/api/entries/${loaded.entryId}/counting-run`, { runId: driven.header.runId }).expect(200);
    const { runs: list } = runsResponseSchema.parse((await person.get(`/api/teams/${person.teamId}/runs`).expect(200)).body);
    expect(list.find((run) => run.id === driven.header.runId)).toMatchObject({ counts: true, finish: { elapsedS: expect.any(Number) } });
  });

  it('asked for twice has one result', async () => {
    const { run } = await settled(driven.header.runId);
    await house.queue.ask(run.id);
    await house.queue.ask(run.id);
    const { header, chunks } = await announceAndSeal(shortJournal(1));
    await settled(header.runId);
    expect(chunks).toHaveLength(1);
    const rows = await house.connection.db.select().from(runResults).where(eq(runResults.runId, run.id));
    expect(rows).toHaveLength(1);
  });
});

describe('a run that counts', () => {
  it('is none of practice, of a faster clock, or still on its way', async () => {
    const { header: practice } = await announceAndSeal(shortJournal(1), { practice: true });
    const { header: fast } = await announceAndSeal(shortJournal(1), { practice: true, clockRate: 20 });
    const open = headerFor(loaded);
    await sendAll(person, open, shortJournal(1));
    const choose = async (runId: string) =>
      (await person.post(`/api/entries/${loaded.entryId}/counting-run`, { runId }).expect(409)).body.code;
    expect(await choose(practice.runId)).toBe('RUN_IS_PRACTICE');
    expect(await choose(fast.runId)).toBe('RUN_IS_PRACTICE');
    expect(await choose(open.runId)).toBe('RUN_NOT_SEALED');
  });

  it('is a run of that entry', async () => {
    const stranger = await newManager(house);
    const theirs = await loadPractice(stranger);
    const response = await stranger.post(`/api/entries/${theirs.entryId}/counting-run`, { runId: driven.header.runId }).expect(404);
    expect(response.body.code).toBe('RUN_NOT_FOUND');
  });
});

describe('what this engine does not know', () => {
  it('is kept, and the result says so', async () => {
    const strange = { seq: 0, at: 0, type: 'moon.v9', phase: 'full' };
    const { header } = await announceAndSeal(chained([encodeBlock(0, [strange])]));
    const { sheet, run } = await settled(header.runId);
    expect(run.status).toBe('ready');
    expect(sheet?.unknownTypes).toEqual(['moon.v9']);
  });
});

describe('a replay that cannot be done', () => {
  it('is told with the run, the journal stays, and the next start tries again', async () => {
    const { header } = await announceAndSeal(chained([newerBlock()]));
    const { run, sheet, failure, held } = await settled(header.runId);
    expect(run.status).toBe('failed');
    expect(sheet).toBeNull();
    expect(failure?.message).toMatch(/Chunk 0 .* cannot be read/);
    expect(held).toMatchObject({ count: 1, sealed: true });
    expect(await outdatedRuns(house.deps, ENGINE_VERSION)).toContain(header.runId);
  });
});

/** A block of a format this Evenline cannot read, its frame and checksum right: written by a newer one. */
function newerBlock(): Uint8Array {
  const bytes = Buffer.from(encodeBlock(0, [{ seq: 0, at: 0, type: 'note.v1', text: 'from tomorrow' }]));
  bytes[2] = 2;
  bytes.writeUInt32LE(crc32(bytes, 0, bytes.length - 4), bytes.length - 4);
  return bytes;
}

describe('a new engine', () => {
  it('finds every sealed run without a result of its own', async () => {
    await settled(driven.header.runId);
    expect(await outdatedRuns(house.deps, ENGINE_VERSION)).not.toContain(driven.header.runId);
    expect(await outdatedRuns(house.deps, '999.0.0')).toContain(driven.header.runId);
    const open = headerFor(loaded);
    await sendAll(person, open, shortJournal(1));
    expect(await outdatedRuns(house.deps, '999.0.0')).not.toContain(open.runId);
  });

  it('is given what was asked for and got lost', async () => {
    const header = headerFor(loaded);
    const chunks = shortJournal(1);
    await sendAll(person, header, chunks);
    // As if the server had died between the seal and the asking.
    await house.connection.db.update(runs).set({ status: 'computing', sealedAt: new Date() }).where(eq(runs.id, header.runId));
    expect(await house.queue.askOutdated()).toBeGreaterThan(0);
    expect((await settled(header.runId)).run.status).toBe('ready');
  });
});
