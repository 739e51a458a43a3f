import { Worker } from 'node:worker_threads';
import type { Replay } from '#server/services/runs/compute-result.ts';
import type { StoredJournal } from '#server/services/runs/read-journal.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import type { Result } from '#shared/result.ts';

/** Replays in a thread of their own, one at a time. A thread that dies or hangs fails its journal only; the next gets a new one. */
export interface ReplayThread {
  readonly replay: Replay;
  close(): Promise<void>;
}

const LONGEST_MS = 120_000;

export function createReplayThread(): ReplayThread {
  let worker: Worker | null = null;
  let last: Promise<unknown> = Promise.resolve();

  async function drop(): Promise<void> {
    const dropped = worker;
    worker = null;
    await dropped?.terminate();
  }

  async function once(journal: StoredJournal): Promise<Result<RunSheet, string>> {
    worker ??= startWorker();
    try {
      return await ask(worker, journal);
    } catch (error) {
      await drop();
      throw error;
    }
  }

  return {
    replay(journal) {
      const result = last.then(() => once(journal));
      last = result.catch(() => undefined);
      return result;
    },
    close: drop,
  };
}

function startWorker(): Worker {
  const worker = new Worker(new URL('./replay-thread-entry.mjs', import.meta.url), { execArgv: [] });
  // An idle thread must not keep the process alive.
  worker.unref();
  return worker;
}

function ask(worker: Worker, journal: StoredJournal): Promise<Result<RunSheet, string>> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => settle(() => reject(new Error(`the replay took longer than ${LONGEST_MS / 1000} s`))), LONGEST_MS);
    const onMessage = (result: Result<RunSheet, string>) => settle(() => resolve(result));
    const onError = (error: Error) => settle(() => reject(error));
    const onExit = (code: number) => settle(() => reject(new Error(`the replay thread ended with code ${code}`)));
    function settle(finish: () => void): void {
      clearTimeout(timer);
      worker.off('message', onMessage).off('error', onError).off('exit', onExit);
      finish();
    }
    worker.on('message', onMessage).on('error', onError).on('exit', onExit);
    worker.postMessage(journal);
  });
}
