import { Worker } from 'node:worker_threads';
import type { Method } from './methods.ts';
import type { SettingName } from './settings.ts';
import type { Outcome } from './truth.ts';

/** Drives of one setting by one method, seeds `from` up to but not including `to`. */
export interface Task {
  readonly setting: SettingName;
  readonly method: Method;
  readonly from: number;
  readonly to: number;
}

/** Outcomes of every task, in the tasks' order whatever thread took it. `done` is told as tasks end. */
export async function runTasks(tasks: readonly Task[], threads: number, done: (count: number) => void): Promise<Outcome[][]> {
  const results: Outcome[][] = [];
  let next = 0;
  let ended = 0;
  const work = async (): Promise<void> => {
    const worker = new Worker(new URL('./worker.mjs', import.meta.url));
    try {
      while (next < tasks.length) {
        const index = next++;
        results[index] = await ask(worker, tasks[index] as Task);
        done(++ended);
      }
    } finally {
      await worker.terminate();
    }
  };
  await Promise.all(Array.from({ length: Math.max(1, Math.min(threads, tasks.length)) }, work));
  return results;
}

function ask(worker: Worker, task: Task): Promise<Outcome[]> {
  return new Promise((resolve, reject) => {
    const answered = (outcomes: Outcome[]): void => {
      worker.off('error', reject);
      resolve(outcomes);
    };
    worker.once('message', answered);
    worker.once('error', reject);
    worker.postMessage(task);
  });
}
