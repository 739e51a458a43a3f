import { wholeField } from './nmea-fields.ts';

/**
 * The sentences of the pulse box, framed as NMEA 0183 with a checksum that is always required:
 *   $PEVLW,<channel>,<cumulative count>,<box us>*hh   a wheel: the count stood at this value at that instant; while the
 *                                                     wheel turns, the instant of the newest counted pulse
 *   $PEVLB,<button>,<press count>,<box us>*hh         a wired button: the instant of the newest counted press, which may be
 *                                                     repeated for a second; later the present instant, as a sign of life
 *   $PEVLT,<box us>*hh                                the edge of the receiver's pulse per second
 * Counts and the box's microseconds wrap at 2^32; channels and buttons are 0..255.
 */
export type PulseSentence =
  | { readonly kind: 'wheel'; readonly channel: number; readonly count: number; readonly boxUs: number }
  | { readonly kind: 'button'; readonly button: number; readonly presses: number; readonly boxUs: number }
  | { readonly kind: 'pps'; readonly boxUs: number };

export const WRAP = 2 ** 32;

/** True if the body (between `$` and `*`) claims to be one of ours. */
export const isPulseSentence = (body: string): boolean => body.startsWith('PEVL');

/** Decodes the body of a sentence of ours with a good checksum; null if any field is missing, extra or out of range. */
export function decodePulse(body: string): PulseSentence | null {
  const fields = body.split(',');
  const boxUs = wholeField(fields.at(-1), 0, WRAP - 1);
  if (boxUs === null) return null;
  if (fields[0] === 'PEVLT' && fields.length === 2) return { kind: 'pps', boxUs };
  const which = wholeField(fields[1], 0, 255);
  const count = wholeField(fields[2], 0, WRAP - 1);
  if (which === null || count === null || fields.length !== 4) return null;
  if (fields[0] === 'PEVLW') return { kind: 'wheel', channel: which, count, boxUs };
  if (fields[0] === 'PEVLB') return { kind: 'button', button: which, presses: count, boxUs };
  return null;
}
