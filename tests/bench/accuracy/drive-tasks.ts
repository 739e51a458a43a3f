import { parentPort } from 'node:worker_threads';
import { driveOnce } from './drive-once.ts';
import type { Task } from './pool.ts';
import { settingOf } from './settings.ts';

/** Drives what it is given, and answers with the outcomes in order of their seeds. */
parentPort?.on('message', ({ setting, method, from, to }: Task) => {
  const outcomes = [];
  for (let seed = from; seed < to; seed++) outcomes.push(driveOnce(settingOf(setting), method, seed));
  parentPort?.postMessage(outcomes);
});
