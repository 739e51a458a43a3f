import { createHash } from 'node:crypto';
import { v7 as uuid } from 'uuid';
import { meResponseSchema } from '#shared/api/auth.ts';
import { eventsResponseSchema } from '#shared/api/events.ts';
import { packResponseSchema } from '#shared/api/pack.ts';
import { encodeBlock } from '#shared/journal/block.ts';
import { fromNdjson } from '#shared/journal/ndjson.ts';
import type { Observation } from '#shared/journal/observation.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import { createOutbox } from '#src/sync/outbox.ts';
import type { UploadFetch } from '#src/sync/upload-client.ts';
import { addRun, type Device, memoryOutboxStore } from '#tests/client/sync/memory-outbox-store.ts';
import { createWorld } from '#tests/client/sync/simulated-world.ts';
import { expect, test } from './fixtures.ts';

const PULSES_A_BLOCK = 25;

/** An odometer check at a walk: pulses, a note, the end. Enough for a score of small chunks. */
function journal(createdMs: number): Observation[] {
  const observations: Observation[] = [
    { seq: 0, at: 0, type: 'epoch.v1', n: 0, mono: 0, wall: createdMs, bridgedBy: 'first', uncertaintyMs: 0 },
    { seq: 1, at: 1, type: 'clock.v1', source: 'wall', officialMs: createdMs, uncertaintyMs: 50 },
  ];
  for (let i = 0; i < 200 * PULSES_A_BLOCK; i++) {
    observations.push({ seq: i + 2, at: (i + 1) * 10_000, type: 'pulse.v1', channel: 1, count: 3 * i, boxUs: (i + 1) * 10_000 });
  }
  const seq = observations.length;
  observations.push({ seq, at: seq * 10_000, type: 'run-ended.v1', outcome: 'retired' });
  return observations;
}

function blocksOf(observations: readonly Observation[]): StoredBlock[] {
  const blocks: StoredBlock[] = [];
  let at = 0;
  while (at < observations.length) {
    const count = observations[at]?.type === 'pulse.v1' ? Math.min(PULSES_A_BLOCK, observations.length - 1 - at) : 1;
    blocks.push({ firstSeq: at, count, bytes: encodeBlock(at, observations.slice(at, at + count)) });
    at += count;
  }
  return blocks;
}

test('the outbox brings a run to the real server by its grant alone, over a network that loses calls and replies', async ({
  page,
  served,
}) => {
  await page.goto('/sign-in');
  await page.getByLabel('email').fill('navigator@evenline.example');
  await page.getByLabel('password').fill('even-line-demo');
  await page.getByRole('button', { name: 'sign in' }).click();
  await expect(page.getByRole('navigation', { name: 'pages' })).toBeVisible();
  const me = meResponseSchema.parse(await (await page.request.get('/api/auth/me')).json());
  const team = me.teams[0]?.id ?? '';
  const { events } = eventsResponseSchema.parse(await (await page.request.get(`/api/teams/${team}/events`)).json());
  const entry = events[0]?.entries.find((one) => one.team.id === team);
  const attempt = entry?.attempts.at(-1);
  const answer = await page.request.post(`/api/attempts/${attempt?.id}/pack`, { data: {}, headers: { origin: served.origin } });
  const { pack, digest, grant } = packResponseSchema.parse(await answer.json());

  const createdMs = Date.UTC(2026, 5, 13, 8);
  const observations = journal(createdMs);
  const header: RunHeader = {
    format: 'evenline-journal',
    version: 1,
    runId: uuid(),
    deviceId: 'tablet-of-the-test',
    entryId: entry?.id ?? '',
    attemptId: attempt?.id ?? '',
    packDigest: digest,
    pack,
    clockRate: 1,
    practice: false,
    createdMs,
    appVersion: '0.1.0',
  };
  const device: Device = { runs: new Map(), grant };
  const run = addRun(device, header, blocksOf(observations), true);

  const { random } = createWorld(5);
  let lost = 0;
  const unsteady: UploadFetch = async (url, init) => {
    const chance = random();
    if (chance < 0.2) lost += 1;
    if (chance < 0.1) throw new TypeError('the call was lost');
    const response = await fetch(served.origin + url, { ...init, headers: { ...init.headers, origin: served.origin } });
    if (chance < 0.2) throw new TypeError('the reply was lost');
    return response;
  };
  const outbox = createOutbox({
    store: memoryOutboxStore(device, async () => undefined),
    fetch: unsteady,
    sha256: async (bytes) => new Uint8Array(createHash('sha256').update(bytes).digest()),
    // Waiting is the policy's business and tested there; here a hundredth of it will do.
    delay: (ms) => new Promise((resolve) => setTimeout(resolve, ms / 100).unref()),
    report: (error) => {
      throw error;
    },
    chunkLimit: 2048,
  });
  const working = outbox.run();
  await expect.poll(() => run.progress, { timeout: 30_000 }).toMatchObject({ state: 'safe on server', blocked: null });
  outbox.stop();
  await working;
  expect(run.chunks.length).toBeGreaterThan(10);
  expect(lost).toBeGreaterThan(3);

  await page.goto(`/runs/${header.runId}`);
  await expect(page.getByText('safe on server')).toBeVisible();
  await expect(page.getByText('retired').first()).toBeVisible({ timeout: 20_000 });
  const exported = fromNdjson(await (await page.request.get(`/api/runs/${header.runId}/journal`)).text());
  expect(exported.ok && exported.value.observations).toEqual(observations);
});
