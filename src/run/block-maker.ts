import { encodeBlock, type Journalled } from '#shared/journal/block.ts';
import { isSensorObservation } from '#shared/journal/observation.ts';
import type { StoredBlock } from '#src/storage/stored-block.ts';
import type { RunEnvironment } from './run-environment.ts';

/** A crash may lose this much of the sensors' observations, and no act of a person. */
export const BATCH_MS = 250;
/** Keeps a block of fixes below what a chunk can take, however fast the session clock runs. */
const MOST_IN_BLOCK = 400;

/** Numbered observations into blocks: sensors' gathered for at most `BATCH_MS`, every act at once and alone. */
export interface BlockMaker {
  add(observation: Journalled): void;
  flush(): void;
}

export function createBlockMaker(
  emit: (block: StoredBlock) => void,
  { clocks, after }: Pick<RunEnvironment, 'clocks' | 'after'>,
): BlockMaker {
  let waiting: Journalled[] = [];
  let since = 0;
  let cancel: () => void = () => undefined;

  const flush = (): void => {
    cancel();
    if (waiting.length > 0) emit(blockOf(waiting));
    waiting = [];
  };
  return {
    flush,
    add(observation) {
      if (!isSensorObservation(observation)) {
        flush();
        emit(blockOf([observation]));
        return;
      }
      if (waiting.length === 0) {
        since = clocks.mono();
        cancel = after(BATCH_MS, flush);
      }
      waiting.push(observation);
      // A hidden page's timers come once a minute: arrival of the next observation is a timer too.
      const due = clocks.mono() - since >= BATCH_MS || waiting.length >= MOST_IN_BLOCK;
      if (due || observation.type === 'button.v1') flush();
    },
  };
}

function blockOf(observations: readonly Journalled[]): StoredBlock {
  const firstSeq = (observations[0] as Journalled).seq;
  return { firstSeq, count: observations.length, bytes: encodeBlock(firstSeq, observations) };
}
