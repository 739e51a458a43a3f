import { decodeBlock, encodeBlock } from '#shared/journal/block.ts';
import type { Observation } from '#shared/journal/observation.ts';
import { begin, step } from '#shared/pace/run.ts';
import { clockCheck, fixes, fromRest, instantOf, journal, pulses, tapAt } from '#tests/unit/pace/drives.ts';
import { pack } from '#tests/unit/pace/packs.ts';
import type { Bench } from './figures.ts';

/** One hour at 100 Hz, as the server replays it: 250 ms blocks decoded and folded one after another. */

const SECONDS = 3600;
const motion = fromRest(2.5, 8.3, 0.4);

function hour(): Observation[] {
  const touches = [4_000, 12_000, 24_000].map((metres) => tapAt(instantOf(motion, metres)));
  return journal([clockCheck(pack)], pulses(motion, { until: SECONDS, hz: 100 }), fixes(motion, { until: SECONDS, hz: 1 }), touches);
}

function blocksOf(observations: readonly Observation[]): Uint8Array[] {
  const blocks: Uint8Array[] = [];
  for (let i = 0; i < observations.length; i += 26) {
    const part = observations.slice(i, i + 26);
    blocks.push(encodeBlock((part[0] as Observation).seq, part));
  }
  return blocks;
}

/** Processor time of the least disturbed round, ms. */
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

export const bench: Bench = ({ quick }) => {
  const observations = hour();
  const blocks = blocksOf(observations);
  const rounds = quick ? 4 : 12;
  const fold = (list: readonly unknown[], state: ReturnType<typeof begin>): void => {
    for (const o of list) step(state, o as Observation);
  };
  let seen = 0;
  const decoding = least(rounds, () =>
    decodeAll(blocks, (list) => {
      seen += list.length;
    }),
  );
  const replaying = least(rounds, () => {
    const state = begin(pack);
    decodeAll(blocks, (list) => fold(list, state));
    if (state.observations !== observations.length) throw new Error('the replay lost observations');
  });
  const folding = least(rounds, () => fold(observations, begin(pack)));
  if (seen !== rounds * observations.length) throw new Error('decoding lost observations');
  return {
    'observations in the hour': { value: observations.length, unit: '' },
    'decoding alone': { value: decoding, unit: 'ms' },
    'fold alone, advice included': { value: folding, unit: 'ms' },
    'decoding and fold': { value: replaying, unit: 'ms', atMost: 100 },
    'replay over decoding alone': { value: replaying / decoding, unit: '×', atMost: 4 },
  };
};
