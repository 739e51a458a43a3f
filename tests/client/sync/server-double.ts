import { createHash } from 'node:crypto';
import type { UploadFetch } from '#src/sync/upload-client.ts';

/**
 * The upload protocol in memory, standing in for a server that keeps what it committed whatever happens to the client.
 * Written from the protocol's description, not from the server's code; a separate API suite holds the real server to it.
 */
export interface ServerDouble {
  handle(request: ServerRequest): ServerAnswer;
  bytesOf(runId: string): Buffer;
  sealed(runId: string): boolean;
  /** Chunks written, and chunk bytes that arrived although they were held already. */
  readonly counts: { written: number; repeatedBytes: number; runs: number };
  readonly grants: Set<string>;
  /** Whether somebody is signed in who may read results; a grant never may. */
  signedIn: boolean;
}

export interface ServerRequest {
  readonly method: string;
  readonly url: string;
  readonly headers: Record<string, string>;
  readonly body: string | Uint8Array | undefined;
}

export interface ServerAnswer {
  readonly status: number;
  readonly body: unknown;
  readonly retryAfter?: string;
}

interface HeldRun {
  readonly header: string;
  readonly chunks: { readonly bytes: Buffer; readonly digest: string }[];
  sealed: boolean;
  asked: number;
}

const ZERO = '0'.repeat(64);
const refusal = (status: number, code: string, more: object = {}): ServerAnswer => ({
  status,
  body: { code, message: 'refused', requestId: 'r', ...more },
});

export function createServerDouble(): ServerDouble {
  const runs = new Map<string, HeldRun>();
  const counts = { written: 0, repeatedBytes: 0, runs: 0 };
  const grants = new Set<string>();

  const headOf = (run: HeldRun) => run.chunks.at(-1)?.digest ?? ZERO;
  const held = (runId: string, run: HeldRun) => ({ runId, count: run.chunks.length, head: headOf(run), sealed: run.sealed });

  function announce(runId: string, header: string): ServerAnswer {
    const known = runs.get(runId);
    if (known !== undefined) return known.header === header ? { status: 200, body: held(runId, known) } : refusal(409, 'RUN_CONFLICT');
    const run: HeldRun = { header, chunks: [], sealed: false, asked: 0 };
    runs.set(runId, run);
    counts.runs += 1;
    return { status: 201, body: held(runId, run) };
  }

  function append(runId: string, run: HeldRun, n: number, bytes: Buffer, digest: string): ServerAnswer {
    const there = run.chunks[n];
    if (there !== undefined) {
      counts.repeatedBytes += bytes.byteLength;
      return there.digest === digest && there.bytes.equals(bytes) ? { status: 204, body: undefined } : refusal(409, 'DIGEST_MISMATCH');
    }
    if (run.sealed) return refusal(409, 'RUN_SEALED');
    if (n > run.chunks.length) return refusal(409, 'SEQUENCE_GAP', { expected: run.chunks.length });
    const derived = createHash('sha256')
      .update(Buffer.from(headOf(run), 'hex'))
      .update(bytes)
      .digest('hex');
    if (derived !== digest) return refusal(409, 'DIGEST_MISMATCH');
    run.chunks.push({ bytes: Buffer.from(bytes), digest });
    counts.written += 1;
    return { status: 201, body: held(runId, run) };
  }

  function seal(runId: string, run: HeldRun, body: string): ServerAnswer {
    const asked = JSON.parse(body) as { count: number; head: string };
    if (asked.count !== run.chunks.length || asked.head !== headOf(run)) return refusal(409, 'SEAL_MISMATCH');
    run.sealed = true;
    return { status: 202, body: { runId, head: headOf(run), status: 'computing' } };
  }

  /** The result of a sealed run is there from the third question on. */
  function status(run: HeldRun): ServerAnswer {
    if (!run.sealed) return { status: 200, body: { run: { status: 'receiving' } } };
    run.asked += 1;
    return { status: 200, body: { run: { status: run.asked > 2 ? 'ready' : 'computing' } } };
  }

  const server: ServerDouble = {
    counts,
    grants,
    signedIn: true,
    bytesOf: (runId) => Buffer.concat(runs.get(runId)?.chunks.map((chunk) => chunk.bytes) ?? []),
    sealed: (runId) => runs.get(runId)?.sealed ?? false,
    handle: ({ method, url, headers, body }) => {
      const bearer = headers['authorization']?.replace('Bearer ', '');
      if (bearer !== undefined && !grants.has(bearer)) return refusal(401, 'GRANT_INVALID');
      const [, , , runId = '', part = '', n = ''] = url.split('/');
      if (method === 'PUT' && part === '') return announce(runId, String(body));
      const run = runs.get(runId);
      if (run === undefined) return refusal(404, 'RUN_NOT_FOUND');
      if (method === 'GET' && part === 'chunks') return { status: 200, body: held(runId, run) };
      if (method === 'PUT') return append(runId, run, Number(n), Buffer.from(body as Uint8Array), headers['x-evenline-digest'] ?? '');
      if (method === 'POST' && part === 'seal') return seal(runId, run, String(body));
      if (bearer !== undefined) return refusal(403, 'FORBIDDEN');
      return server.signedIn ? status(run) : refusal(401, 'SIGN_IN_REQUIRED');
    },
  };
  return server;
}

export function responseOf(answer: ServerAnswer): Awaited<ReturnType<UploadFetch>> {
  return {
    status: answer.status,
    headers: { get: (name) => (name === 'retry-after' ? (answer.retryAfter ?? null) : null) },
    json: async () => {
      if (answer.body === undefined) throw new SyntaxError('no body');
      return structuredClone(answer.body);
    },
  };
}
