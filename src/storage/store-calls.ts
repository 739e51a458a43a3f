import type { JournalStore } from './journal-store.ts';
import { storageFailure } from './storage-fault.ts';

/** A JournalStore on the other side of a port: calls go over as data, answers come back as data. */

type Method = keyof JournalStore;

/** How a call that cannot be made is answered: as a failure value, or by rejecting. */
const ANSWERS: Readonly<Record<Method, 'failure' | 'rejection'>> = {
  createRun: 'failure',
  append: 'failure',
  readRun: 'failure',
  listRuns: 'rejection',
  releaseRun: 'rejection',
  removeRun: 'failure',
  putSnapshot: 'rejection',
  getSnapshot: 'rejection',
  facts: 'rejection',
  putPack: 'failure',
  getPackForAttempt: 'rejection',
  listPacks: 'rejection',
  removePack: 'failure',
  pending: 'rejection',
  blocks: 'failure',
  chunks: 'rejection',
  keepChunks: 'rejection',
  progress: 'rejection',
  grant: 'rejection',
};

/** The part of a Worker or MessagePort that is used. */
export interface CallPort {
  postMessage(message: unknown): void;
  onmessage: ((event: MessageEvent) => void) | null;
}

interface Call {
  readonly id: number;
  readonly method: Method;
  readonly args: readonly unknown[];
}
interface Answer {
  readonly id: number;
  readonly value?: unknown;
  readonly error?: string;
}

type AnyMethod = (...args: readonly unknown[]) => Promise<unknown>;

/** Answers the calls that come over `port`, once the store is there. */
export function serveStore(store: Promise<JournalStore>, port: CallPort): void {
  // Told to every caller; it needs no report of its own.
  store.catch(() => undefined);
  port.onmessage = ({ data }: MessageEvent<Call>) => void answer(store, data).then((reply) => port.postMessage(reply));
}

async function answer(store: Promise<JournalStore>, { id, method, args }: Call): Promise<Answer> {
  try {
    const target = (await store) as unknown as Readonly<Record<Method, AnyMethod>>;
    return { id, value: await target[method](...args) };
  } catch (error) {
    return { id, error: error instanceof Error ? error.message : String(error) };
  }
}

export interface StoreClient {
  readonly store: JournalStore;
  /** The other side is gone: whatever waits for an answer is told so, and so is every later call. */
  fail(reason: string): void;
}

export function connectStore(port: CallPort): StoreClient {
  const waiting = new Map<number, (reply: Answer) => void>();
  let next = 0;
  let gone: string | null = null;
  port.onmessage = ({ data }: MessageEvent<Answer>) => {
    waiting.get(data.id)?.(data);
    waiting.delete(data.id);
  };
  const call = (method: Method, args: readonly unknown[]): Promise<unknown> =>
    new Promise((resolve, reject) => {
      const settle = ({ value, error }: Answer): void => {
        if (error === undefined) resolve(value);
        else if (ANSWERS[method] === 'failure') resolve({ ok: false, error: storageFailure('unavailable', error) });
        else reject(new Error(error));
      };
      const id = next++;
      if (gone !== null) return settle({ id, error: gone });
      waiting.set(id, settle);
      port.postMessage({ id, method, args } satisfies Call);
    });
  const methods = Object.keys(ANSWERS).map((method) => [method, (...args: readonly unknown[]) => call(method as Method, args)]);
  return {
    store: Object.fromEntries(methods) as unknown as JournalStore,
    fail: (reason) => {
      gone = reason;
      for (const [id, settle] of waiting) settle({ id, error: reason });
      waiting.clear();
    },
  };
}
