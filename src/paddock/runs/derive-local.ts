import { decodeBlocks } from '#shared/journal/block.ts';
import { toNdjson } from '#shared/journal/ndjson.ts';
import type { Observation, UnknownObservation } from '#shared/journal/observation.ts';
import { replay } from '#shared/journal/replay.ts';
import type { RunHeader } from '#shared/journal/run-header.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { fail, ok, type Result } from '#shared/result.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';

/** A run told from this device's own journal, by the same fold as cockpit and server. Needs no connection. */
export interface LocalRun {
  readonly header: RunHeader;
  readonly observations: readonly (Observation | UnknownObservation)[];
  /** Where the journal breaks off, in words; null when it is whole. What comes before is told all the same. */
  readonly damage: string | null;
}

export interface LocalRunFailure {
  readonly message: string;
}

export async function readLocalRun(runId: string, journals: JournalStore): Promise<Result<LocalRun, LocalRunFailure>> {
  const stored = await journals.readRun(runId);
  if (!stored.ok) return fail({ message: stored.error.message });
  const observations: (Observation | UnknownObservation)[] = [];
  for (const { bytes } of stored.value.blocks) {
    const decoded = decodeBlocks(bytes);
    const sound = decoded.ok ? decoded.value : decoded.error.blocks;
    for (const block of sound) for (const observation of block.observations) observations.push(observation);
    if (!decoded.ok) return ok({ header: stored.value.header, observations, damage: decoded.error.message });
  }
  return ok({ header: stored.value.header, observations, damage: null });
}

export const localSheet = ({ header, observations }: LocalRun): RunSheet => runSheet(replay(header, observations), header);

export const localNdjson = ({ header, observations }: LocalRun): string => toNdjson(header, observations);
