import { describe, expect, it } from 'vitest';
import { encodeBlock } from '#shared/journal/block.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { fail, ok } from '#shared/result.ts';
import { localNdjson, localSheet, readLocalRun } from '#src/paddock/runs/derive-local.ts';
import { runRows } from '#src/paddock/runs/run-rows.ts';
import type { JournalStore, StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { sampleRun } from './sample-answers.ts';
import { sampleHeader } from './sample-header.ts';
import { IDS } from './sample-pack.ts';

const observations: readonly Observation[] = [
  { seq: 0, at: 0, type: 'epoch.v1', n: 0, mono: 10, wall: sampleHeader.createdMs, bridgedBy: 'first', uncertaintyMs: 0 },
  { seq: 1, at: 1_000, type: 'note.v1', text: 'dry, 14 °C' },
  { seq: 2, at: 2_000, type: 'run-ended.v1', outcome: 'retired' },
];

const blocks: readonly StoredBlock[] = observations.map((observation) => ({
  firstSeq: observation.seq,
  count: 1,
  bytes: encodeBlock(observation.seq, [observation]),
}));

const storeOf = (stored: readonly StoredBlock[]) =>
  ({ readRun: async () => ok({ header: sampleHeader, blocks: stored, recovered: 'database' as const }) }) as unknown as JournalStore;

async function read(store: JournalStore) {
  const run = await readLocalRun(IDS.run, store);
  if (!run.ok) throw new Error(run.error.message);
  return run.value;
}

describe('a run told from this device', () => {
  it('is the fold of its own journal', async () => {
    const sheet = localSheet(await read(storeOf(blocks)));
    expect(sheet).toMatchObject({ runId: IDS.run, outcome: 'retired', observations: 3, targetTimeS: 1220 });
  });

  it('exports what the text format reads back', async () => {
    const text = fromNdjson(localNdjson(await read(storeOf(blocks))));
    expect(text.ok && text.value.observations).toEqual(observations);
  });

  it('tells what comes before damage, and where the journal breaks off', async () => {
    const torn = { ...(blocks[2] as StoredBlock), bytes: (blocks[2] as StoredBlock).bytes.map((byte, i) => (i === 9 ? byte ^ 1 : byte)) };
    const run = await read(storeOf([...blocks.slice(0, 2), torn]));
    expect(run.observations).toHaveLength(2);
    expect(run.damage).not.toBeNull();
  });

  it('says what is wrong where storage cannot read it', async () => {
    const store = { readRun: async () => fail({ code: 'unknown-run', message: 'No such run here.' }) } as unknown as JournalStore;
    expect(await readLocalRun('x', store)).toEqual({ ok: false, error: { message: 'No such run here.' } });
  });
});

describe('runs of server and device in one list', () => {
  const local = (runId: string, createdMs: number): StoredRunSummary => ({
    runId,
    header: { ...sampleHeader, runId, createdMs },
    nextSeq: 3,
    ended: true,
    upload: 'on this device',
  });

  it('shows a run on both once, newest first', () => {
    const rows = runRows([sampleRun], [local(IDS.run, sampleRun.createdMs), local(IDS.secondRun, sampleRun.createdMs + 1)], IDS.team);
    expect(rows.map(({ id, server, local: here }) => [id, server !== null, here !== null])).toEqual([
      [IDS.secondRun, false, true],
      [IDS.run, true, true],
    ]);
  });

  it('keeps another team’s runs off the list', () => {
    expect(runRows([], [local(IDS.run, 1)], IDS.car)).toEqual([]);
  });
});
