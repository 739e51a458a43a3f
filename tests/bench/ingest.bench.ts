import { v7 as uuidv7 } from 'uuid';
import { type Connection, connect } from '#server/db/connect.ts';
import { migrate } from '#server/db/migrate.ts';
import { memberships } from '#server/db/schema/memberships.ts';
import { teams } from '#server/db/schema/teams.ts';
import { users } from '#server/db/schema/users.ts';
import { openDisposableCluster } from '#server/postgres/cluster.mjs';
import { serviceDeps } from '#server/service-deps.ts';
import type { ServiceContext, ServiceDeps } from '#server/services/context.ts';
import { loadPack } from '#server/services/packs/load-pack.ts';
import { createPracticeEvent } from '#server/services/practice/create-practice-event.ts';
import { appendChunk } from '#server/services/runs/append-chunk.ts';
import { chainDigest } from '#server/services/runs/chain.ts';
import { createRun } from '#server/services/runs/create-run.ts';
import { ZERO_DIGEST } from '#shared/api/fields.ts';
import { CHUNK_TARGET_BYTES } from '#shared/api/runs.ts';
import { encodeBlock } from '#shared/journal/block.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { administer, databaseUrl } from '#tests/setup/administer.ts';
import { copyIn, copyRow } from './copy-in.ts';
import type { Bench } from './figures.ts';

/** Journal chunks through the service (chain, checksums, one transaction each) against COPY of the same rows in one go. */
export const bench: Bench = async ({ quick }) => {
  const cluster = await openDisposableCluster((text) => console.error(text));
  try {
    await administer(cluster.url, 'create database bench');
    const url = databaseUrl(cluster.url, 'bench');
    await migrate(url);
    return await measure(url, quick ? 3 : 9);
  } finally {
    await cluster.release();
  }
};

interface Chunk {
  readonly n: number;
  readonly bytes: Buffer;
  readonly digest: string;
  readonly firstSeq: number;
  readonly count: number;
}

const CHUNKS = 120;

async function measure(url: string, rounds: number) {
  const connection = connect(url, { patient: true });
  const bencher = await someone(serviceDeps(connection, async () => undefined));
  const chunks = journal();
  const bytes = chunks.reduce((sum, chunk) => sum + chunk.bytes.length, 0);
  const observations = chunks.reduce((sum, chunk) => sum + chunk.count, 0);
  await connection.pool.query('create table copied (like run_chunks including all)');
  const ingest: number[] = [];
  const copy: number[] = [];
  try {
    for (let round = 0; round <= rounds; round++) {
      const runId = await announce(bencher);
      const took = {
        ingest: await timed(() => append(bencher, runId, chunks)),
        copy: await timed(() => copyAll(connection.pool, runId, chunks)),
      };
      // The first round warms up.
      if (round === 0) continue;
      ingest.push(took.ingest);
      copy.push(took.copy);
    }
  } finally {
    await connection.close();
  }
  return {
    'chunks of 256 KiB, ingest': { value: bytes / 1e6 / median(ingest), unit: 'MB/s' },
    'the same rows by COPY': { value: bytes / 1e6 / median(copy), unit: 'MB/s' },
    'ingest over COPY': { value: median(copy.map((seconds, i) => seconds / (ingest[i] ?? Number.NaN))), unit: '', atLeast: 0.5 },
    'observations stored': { value: observations / median(ingest), unit: '/s' },
    '180 000 observations': { value: (180_000 * median(ingest)) / observations, unit: 's', atMost: 3 },
  };
}

interface Bencher {
  readonly ctx: ServiceContext;
  readonly attemptId: string;
}

async function someone(deps: ServiceDeps): Promise<Bencher> {
  const [user] = await deps.db.insert(users).values({ email: 'bench@evenline.example', name: 'Bench', passwordHash: '-' }).returning();
  const [team] = await deps.db.insert(teams).values({ name: 'Bench' }).returning();
  if (!user || !team) throw new Error('insert returned no row');
  await deps.db.insert(memberships).values({ teamId: team.id, userId: user.id, role: 'manager' });
  const ctx: ServiceContext = { ...deps, actor: { kind: 'user', userId: user.id } };
  const { attemptId } = await createPracticeEvent(ctx, team.id);
  return { ctx, attemptId };
}

async function announce({ ctx, attemptId }: Bencher): Promise<string> {
  const { digest, pack } = await loadPack(ctx, attemptId);
  const runId = uuidv7();
  await createRun(ctx, runId, {
    format: 'evenline-journal',
    version: 1,
    runId,
    deviceId: 'bench',
    entryId: pack.entry.id,
    attemptId,
    packDigest: digest,
    pack,
    clockRate: 1,
    practice: true,
    createdMs: Date.now(),
    appVersion: 'bench',
  });
  return runId;
}

/** Two wheel channels at 100 Hz in blocks of 250 ms, until that many chunks are full. */
function journal(): readonly Chunk[] {
  const chunks: Chunk[] = [];
  let head = ZERO_DIGEST;
  let seq = 0;
  while (chunks.length < CHUNKS) {
    const firstSeq = seq;
    const blocks: Uint8Array[] = [];
    for (let size = 0; size < CHUNK_TARGET_BYTES - 512; size += blocks.at(-1)?.length ?? 0) {
      blocks.push(
        encodeBlock(
          seq,
          Array.from({ length: 50 }, () => pulse(seq++)),
        ),
      );
    }
    const bytes = Buffer.concat(blocks);
    head = chainDigest(head, bytes);
    chunks.push({ n: chunks.length, bytes, digest: head, firstSeq, count: seq - firstSeq });
  }
  return chunks;
}

function pulse(seq: number): Observation {
  const at = Math.floor(seq / 2) * 10_000 + ((seq * 7919) % 400);
  return { seq, at, type: 'pulse.v1', channel: 1 + (seq % 2), count: Math.floor(at / 1700), boxUs: (at + 1_234_567) % 2 ** 32 };
}

async function append({ ctx }: Bencher, runId: string, chunks: readonly Chunk[]): Promise<void> {
  for (const { n, bytes, digest } of chunks) await appendChunk(ctx, runId, { n, bytes, digest });
}

async function copyAll(pool: Connection['pool'], runId: string, chunks: readonly Chunk[]): Promise<void> {
  const client = await pool.connect();
  try {
    const rows = chunks.map(({ n, bytes, digest, firstSeq, count }) =>
      copyRow([Buffer.from(runId.replaceAll('-', ''), 'hex'), int4(n), bytes, Buffer.from(digest), int8(firstSeq), int4(count)]),
    );
    await copyIn(client, 'copy copied (run_id, n, bytes, digest, first_seq, count) from stdin with (format binary)', rows);
  } finally {
    client.release();
  }
}

function int4(value: number): Buffer {
  const bytes = Buffer.alloc(4);
  bytes.writeInt32BE(value);
  return bytes;
}

function int8(value: number): Buffer {
  const bytes = Buffer.alloc(8);
  bytes.writeBigInt64BE(BigInt(value));
  return bytes;
}

async function timed(work: () => Promise<void>): Promise<number> {
  const begun = performance.now();
  await work();
  return (performance.now() - begun) / 1000;
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN;
}
