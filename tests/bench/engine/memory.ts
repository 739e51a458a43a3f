import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { begin, step } from '#shared/pace/run.ts';
import { longPack, longRun } from './long-run.ts';

/** What a run keeps in memory, after hours of it. */
export interface Kept {
  readonly hours: number;
  readonly heapMb: number;
}

const MB = 1024 * 1024;

/** Heap in use by one state after each of the hours, everything collectable collected. */
export function memoryOver(hours: readonly number[]): Kept[] {
  setFlagsFromString('--expose-gc');
  const collect = runInNewContext('gc') as () => void;
  const inUse = (): number => {
    collect();
    const { heapUsed, arrayBuffers } = process.memoryUsage();
    return (heapUsed + arrayBuffers) / MB;
  };
  const last = Math.max(...hours);
  const pack = longPack(last);
  const before = inUse();
  const state = begin(pack);
  const kept: Kept[] = [];
  let next = 0;
  const begun = state.now;
  for (const o of longRun(pack, last * 3600)) {
    if (next < hours.length && o.at - begun >= (hours[next] as number) * 3_600_000_000) {
      kept.push({ hours: hours[next] as number, heapMb: inUse() - before });
      next++;
    }
    step(state, o);
  }
  if (state.observations === 0) throw new Error('the run was empty');
  return kept;
}
