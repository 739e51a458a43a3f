import type { DistanceUnit } from '#shared/units.ts';
import { toGoText } from '#src/cockpit/view/words.ts';

/** `slow, stop board 1.4 km`; where the book prints no stop board, slow alone. */
export function slowWords(stopBoardInM: number | null, unit: DistanceUnit): string {
  if (stopBoardInM === null) return 'slow';
  return stopBoardInM > 0 ? `slow,\nstop board ${toGoText(stopBoardInM, unit)}` : 'slow,\nstop board passed';
}
