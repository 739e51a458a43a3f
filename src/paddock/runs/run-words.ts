import type { RunSummary } from '#shared/api/runs.ts';
import { roundedDigits } from '#shared/course/format.ts';
import type { LegRow, TapRow } from '#shared/pace/run-sheet.ts';

/** A run in words; the same ones on every page. */

/** `11.2 on`, `3.1 back`: how far the official distance moved at a touch, metres. Null where no touch was used. */
export function movedText(metres: number | null): string | null {
  if (metres === null) return null;
  const digits = roundedDigits(metres, 1);
  if (Number(digits) === 0) return `${digits}     `;
  return `${digits} ${(metres > 0 ? 'on' : 'back').padEnd(4)}`;
}

export const BY_WORDS: Readonly<Record<LegRow['by'], string>> = {
  tap: 'touched',
  distance: 'by distance',
  skipped: 'skipped',
  'not reached': 'not reached',
};

/**
 * `, 42.3 m before the place`: where a touch that was not used came, by the distance believed then; before engines told that,
 * by how much it would have moved the distance. Empty where it came at the place, or where nobody knows.
 */
export function misfitText({ figures, movedM }: Pick<TapRow, 'figures' | 'movedM'>): string {
  const metres = figures?.misfitM ?? movedM;
  const digits = roundedDigits(Math.abs(metres), 1);
  return Number(digits) === 0 ? '' : `, ${digits} m ${metres > 0 ? 'before' : 'after'} the place`;
}

const KEPT_WORDS: Readonly<Record<string, string>> = {
  settle: 'kept: tyres still settling',
  place: 'kept: a place only',
  'leg too short': 'kept: leg too short to trust',
  rule: 'kept: the team corrects places only',
};

export const keptText = (reason: string): string => KEPT_WORDS[reason] ?? `kept: ${reason}`;

export const STATUS_WORDS: Readonly<Record<RunSummary['status'], string>> = {
  receiving: 'being received',
  computing: 'run sheet being derived',
  ready: 'run sheet ready',
  failed: 'run sheet could not be derived',
};
