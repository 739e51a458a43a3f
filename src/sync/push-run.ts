import { fail, ok, type Result } from '#shared/result.ts';
import type { ChunkStore, KeptChunk, OutboxRun } from '#src/storage/chunk-store.ts';
import type { StorageFailure } from '#src/storage/stored-block.ts';
import type { UploadProgress } from '#src/storage/upload-progress.ts';
import { bytesOfCut, cutChunks } from './chunk-cutter.ts';
import { chainDigest, FIRST_DIGEST, type Sha256 } from './digest-chain.ts';
import type { UploadFailureCode } from './retry-policy.ts';
import type { UploadClient, UploadFailure } from './upload-client.ts';

/**
 * One pass over one run: announce, ask what is held, send what is not, seal. May be cut at any await and begun again: what
 * the server holds is always asked, never remembered.
 */
export interface PushDeps {
  readonly store: ChunkStore;
  readonly client: UploadClient;
  readonly sha256: Sha256;
  /** Writes down how far the run has come. */
  readonly say: (change: Partial<UploadProgress>) => Promise<void>;
  /** Called whenever the server confirmed something new. */
  readonly progressed: () => void;
  readonly chunkLimit: number;
}

type Push<T> = Promise<Result<T, UploadFailure>>;

/** `idle`: everything there is was sent, and more will come. `sealed`: the server has committed the whole run. */
export async function pushRun(run: OutboxRun, deps: PushDeps): Push<'idle' | 'sealed'> {
  const { client, say } = deps;
  const announced = await client.announce(run.header);
  if (!announced.ok) return announced;
  const held = await client.held();
  if (!held.ok) return held;
  await say({ state: 'sending', blocked: null });
  const chunks = await cutAndKeep(run, deps);
  if (!chunks.ok) return chunks;
  const agreed = agreeOnHead(chunks.value, held.value.count, held.value.head);
  if (!agreed.ok) return agreed;
  if (held.value.count > run.progress.confirmed) await confirm(held.value.count, deps);
  const sent = await sendFrom(run, chunks.value, held.value.count, deps);
  if (!sent.ok) return sent;
  if (!run.ended) {
    await say({ state: 'on this device' });
    return ok('idle');
  }
  const sealed = await client.seal({ count: chunks.value.length, head: headOf(chunks.value) });
  if (!sealed.ok) return sealed;
  await say({ state: 'safe on server', blocked: null });
  deps.progressed();
  return ok('sealed');
}

/** Keeps the cuts (with their digests) before the first byte of them goes out. */
async function cutAndKeep(run: OutboxRun, deps: PushDeps): Push<readonly KeptChunk[]> {
  const kept = await deps.store.chunks(run.runId);
  const fromSeq = kept.at(-1)?.nextSeq ?? 0;
  const blocks = await deps.store.blocks(run.runId, fromSeq);
  if (!blocks.ok) return fail(unread(blocks.error));
  const cuts = cutChunks(blocks.value, fromSeq, deps.chunkLimit);
  if (!cuts.ok) return fail(onDevice(cuts.error.code, cuts.error.message));
  const fresh: KeptChunk[] = [];
  let digest = headOf(kept);
  for (const cut of cuts.value) {
    const bytes = bytesOfCut(blocks.value, cut);
    if (!bytes.ok) return fail(onDevice(bytes.error.code, bytes.error.message));
    digest = await chainDigest(digest, bytes.value, deps.sha256);
    fresh.push({ ...cut, n: kept.length + fresh.length, digest });
  }
  if (fresh.length > 0) await deps.store.keepChunks(run.runId, fresh);
  return ok([...kept, ...fresh]);
}

async function sendFrom(run: OutboxRun, chunks: readonly KeptChunk[], held: number, deps: PushDeps): Push<void> {
  const first = chunks[held];
  if (first === undefined) return ok(undefined);
  const blocks = await deps.store.blocks(run.runId, first.firstSeq);
  if (!blocks.ok) return fail(unread(blocks.error));
  for (const chunk of chunks.slice(held)) {
    const bytes = bytesOfCut(blocks.value, chunk);
    if (!bytes.ok) return fail(onDevice(bytes.error.code, bytes.error.message));
    const put = await deps.client.putChunk(chunk.n, bytes.value, chunk.digest);
    if (!put.ok) return put;
    await confirm(chunk.n + 1, deps);
  }
  return ok(undefined);
}

async function confirm(confirmed: number, deps: PushDeps): Promise<void> {
  await deps.say({ confirmed });
  deps.progressed();
}

const headOf = (chunks: readonly KeptChunk[]): string => chunks.at(-1)?.digest ?? FIRST_DIGEST;

/** The last chunk the server holds must be ours, byte for byte, before anything is put behind it. */
function agreeOnHead(chunks: readonly KeptChunk[], count: number, head: string): Result<void, UploadFailure> {
  if (count <= chunks.length && head === headOf(chunks.slice(0, count))) return ok(undefined);
  return fail(onDevice('DIGEST_MISMATCH', `The server holds ${count} chunks of this run that are not the ones on this device.`));
}

const onDevice = (code: UploadFailureCode, message: string): UploadFailure => ({ code, message, retryAfterMs: null });

/** Only a damaged journal is final; storage that is closed or busy comes back. */
const unread = (error: StorageFailure): UploadFailure =>
  onDevice(error.code === 'corrupt' || error.code === 'out-of-order' ? 'JOURNAL_DAMAGED' : 'STORAGE', error.message);
