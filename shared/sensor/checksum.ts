/**
 * The frame of a sentence: `$`, body, `*`, two hex digits, end of line.
 * Checksum: exclusive or of the characters between `$` and `*` (NMEA 0183, as described in gpsd's "NMEA Revealed").
 */

/** Exclusive or of the low bytes of the characters of `body` (the text between `$` and `*`), 0..255. */
export function checksumOf(body: string): number {
  let sum = 0;
  for (let i = 0; i < body.length; i += 1) sum ^= body.charCodeAt(i) & 0xff;
  return sum;
}

/** `$body*HH` with its checksum, without an end of line. */
export function frameSentence(body: string): string {
  return `$${body}*${checksumOf(body).toString(16).toUpperCase().padStart(2, '0')}`;
}

export type SentenceVerdict = 'ok' | 'bad' | 'malformed' | 'no checksum';

const WITH_CHECKSUM = /^\$([A-Z][A-Z0-9]+[^*]*)\*([0-9A-Fa-f]{2})$/;
const WITHOUT_CHECKSUM = /^\$[A-Z][A-Z0-9]+(,[^*]*)?$/;

/**
 * Judges one line as it stands, without its end of line: `ok` fits its checksum, `bad` does not, `no checksum` is a
 * whole sentence that carries none, everything else is `malformed`.
 */
export function judgeSentence(line: string): SentenceVerdict {
  const framed = WITH_CHECKSUM.exec(line);
  if (framed) return checksumOf(framed[1] ?? '') === Number.parseInt(framed[2] ?? '', 16) ? 'ok' : 'bad';
  return WITHOUT_CHECKSUM.test(line) ? 'no checksum' : 'malformed';
}
