import type { Journalled } from '#shared/journal/block.ts';
import type { NewObservation, Observation } from '#shared/journal/observation.ts';
import { micros } from '#shared/units.ts';
import type { BlockMaker } from './block-maker.ts';
import type { JournalQueue } from './journal-queue.ts';
import { type KnownRun, takeObservation } from './known-run.ts';

/** Gives out seq, and keeps what was numbered until storage has acknowledged it. */
export interface Numbering {
  /** Takes nothing once the run has ended. */
  put(observations: readonly NewObservation[]): void;
  /** Numbered by an earlier life, already in the state, not yet in the journal. */
  putAgain(observations: readonly Journalled[]): void;
  uncommitted(): readonly Journalled[];
}

export function createNumbering(
  run: KnownRun,
  blocks: BlockMaker,
  queue: JournalQueue,
  numbered: (observations: readonly Journalled[]) => void,
): Numbering {
  let pending: Journalled[] = [];
  const keep = (observation: Journalled): void => {
    pending.push(observation);
    blocks.add(observation);
  };
  const trim = (): readonly Journalled[] => {
    pending = pending.filter(({ seq }) => seq >= queue.committed);
    return pending;
  };
  return {
    put(observations) {
      if (observations.length === 0 || run.state.acts.ended !== null) return;
      trim();
      const all = observations.map((o, i) => ({ ...o, at: micros(o.at), seq: run.nextSeq + i }) as Observation);
      for (const observation of all) {
        keep(observation);
        takeObservation(run, observation);
      }
      numbered(all);
    },
    putAgain: (observations) => observations.forEach(keep),
    uncommitted: trim,
  };
}
