import { decodeBlock } from '#shared/journal/block.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { begin, type RunState, step } from '#shared/pace/run.ts';
import { createBlockMaker } from '#src/run/block-maker.ts';
import { longPack, longRun } from './engine/long-run.ts';
import { memoryOver } from './engine/memory.ts';
import { profileOf, profileTable } from './engine/profile.ts';
import { replanMicroseconds } from './engine/replans.ts';
import { type Bench, type Figures, figuresTable } from './figures.ts';

/** One hour at 100 Hz as the server replays it, what a plan costs, what a run keeps in memory, and where the time goes. */

const HOUR_S = 3600;
const pack = longPack(1);

/** The cockpit's own blocks, by the time of the journal itself. */
function blocksOf(observations: readonly Observation[]): Uint8Array[] {
  const blocks: Uint8Array[] = [];
  let now = 0;
  const maker = createBlockMaker((block) => blocks.push(block.bytes), {
    clocks: { mono: () => now, wall: () => now },
    after: () => () => undefined,
  });
  for (const o of observations) {
    now = o.at / 1000;
    maker.add(o);
  }
  maker.flush();
  return blocks;
}

/** Processor time of the least disturbed round, ms: other processes of the machine do not count. */
function least(rounds: number, work: () => void): number {
  let best = Number.POSITIVE_INFINITY;
  for (let i = 0; i < rounds; i++) {
    const before = process.cpuUsage();
    work();
    const { user, system } = process.cpuUsage(before);
    best = Math.min(best, (user + system) / 1000);
  }
  return best;
}

function decodeAll(blocks: readonly Uint8Array[], each: (observations: readonly unknown[]) => void): void {
  for (const bytes of blocks) {
    const block = decodeBlock(bytes);
    if (!block.ok) throw new Error(block.error.message);
    each(block.value.observations);
  }
}

function fold(observations: readonly unknown[], state: RunState): void {
  for (const o of observations) step(state, o as Observation);
}

export const bench: Bench = async ({ quick }) => {
  const observations = [...longRun(pack, HOUR_S)];
  const blocks = blocksOf(observations);
  const rounds = quick ? 5 : 15;
  let seen = 0;
  const decodeMs = least(rounds, () =>
    decodeAll(blocks, (list) => {
      seen += list.length;
    }),
  );
  if (seen !== rounds * observations.length) throw new Error('decoding lost observations');
  const replayMs = least(rounds, () => {
    const state = begin(pack);
    decodeAll(blocks, (list) => fold(list, state));
    if (state.observations !== observations.length) throw new Error('the replay lost observations');
  });
  const decoded: unknown[] = [];
  decodeAll(blocks, (list) => decoded.push(...list));
  const foldMs = least(rounds, () => fold(decoded, begin(pack)));
  const replanUs = replanMicroseconds(quick ? 300 : 2_000);
  const profile = await profileOf(() => {
    for (let i = 0; i < rounds; i++) {
      const state = begin(pack);
      decodeAll(blocks, (list) => fold(list, state));
    }
  });
  const kept = memoryOver(quick ? [1, 3] : [1, 6, 12]);
  const stepsPerSecond = (observations.length * 1000) / foldMs;
  const journalBytesPerHour = blocks.reduce((sum, { length }) => sum + length, 0);
  const figures: Figures = {
    'observations in the hour': { value: observations.length, unit: '' },
    'decoding alone': { value: decodeMs, unit: 'ms' },
    'decoding and fold': { value: replayMs, unit: 'ms', atMost: 100 },
    'replay over decoding alone': { value: replayMs / decodeMs, unit: '×', atMost: 4 },
    'fold alone, advice included': { value: foldMs, unit: 'ms' },
    'through step': { value: stepsPerSecond, unit: '/s' },
    'through replay': { value: (observations.length * 1000) / replayMs, unit: '/s' },
    'a plan over 50 zones, warm': { value: replanUs, unit: 'µs', atMost: 50 },
    'journal of the hour': { value: journalBytesPerHour, unit: 'bytes' },
    'blocks of the hour': { value: blocks.length, unit: '' },
    ...Object.fromEntries(kept.map(({ hours, heapMb }) => [`a run keeps after ${hours} h`, { value: heapMb, unit: 'MB' }])),
  };
  return {
    text: `${figuresTable(figures)}\n\nself time of decoding and fold\n${profileTable(profile)}`,
    json: {
      replayMs,
      decodeMs,
      replanUs,
      stepsPerSecond,
      journalBytesPerHour,
      replayOverDecode: replayMs / decodeMs,
      foldMs,
      kept,
      profile,
    },
  };
};
