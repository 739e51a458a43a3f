/** UTF-8 in plain ECMAScript: this folder has neither DOM nor Node. Source: RFC 3629. */

/** A lone surrogate, which UTF-8 cannot carry, becomes U+FFFD. */
export function utf8Encode(text: string): Uint8Array {
  const bytes = new Uint8Array(text.length * 3);
  let n = 0;
  for (let i = 0; i < text.length; i++) {
    let code = text.charCodeAt(i);
    if (code < 0x80) {
      bytes[n++] = code;
      continue;
    }
    if (code >= 0xd800 && code <= 0xdfff) {
      const point = text.codePointAt(i) as number;
      if (point > 0xffff) i++;
      code = point > 0xffff ? point : 0xfffd;
    }
    n = put(bytes, n, code);
  }
  return bytes.subarray(0, n);
}

function put(bytes: Uint8Array, at: number, code: number): number {
  let n = at;
  if (code < 0x800) {
    bytes[n++] = 0xc0 | (code >> 6);
  } else {
    if (code < 0x10000) {
      bytes[n++] = 0xe0 | (code >> 12);
    } else {
      bytes[n++] = 0xf0 | (code >> 18);
      bytes[n++] = 0x80 | ((code >> 12) & 0x3f);
    }
    bytes[n++] = 0x80 | ((code >> 6) & 0x3f);
  }
  bytes[n++] = 0x80 | (code & 0x3f);
  return n;
}

/** Text of `bytes[from..to)`, or null where it is not well-formed UTF-8. */
export function utf8Decode(bytes: Uint8Array, from: number, to: number): string | null {
  let text = '';
  for (let i = from; i < to; ) {
    const run = asciiRun(bytes, i, Math.min(to, i + 4096));
    if (run > i) {
      text += String.fromCharCode.apply(null, bytes.subarray(i, run) as unknown as number[]);
      i = run;
      continue;
    }
    const length = sequenceLength(bytes[i] as number);
    const code = length === 0 || i + length > to ? -1 : codePoint(bytes, i, length);
    if (code < 0) return null;
    text += String.fromCodePoint(code);
    i += length;
  }
  return text;
}

function asciiRun(bytes: Uint8Array, from: number, to: number): number {
  let i = from;
  while (i < to && (bytes[i] as number) < 0x80) i++;
  return i;
}

function sequenceLength(lead: number): number {
  if (lead >= 0xc2 && lead <= 0xdf) return 2;
  if (lead >= 0xe0 && lead <= 0xef) return 3;
  return lead >= 0xf0 && lead <= 0xf4 ? 4 : 0;
}

const LEAST = [0, 0, 0x80, 0x800, 0x10000] as const;

/** -1 for an overlong form, a surrogate, or anything above U+10FFFF. */
function codePoint(bytes: Uint8Array, at: number, length: number): number {
  let code = (bytes[at] as number) & (0x7f >> length);
  for (let k = 1; k < length; k++) {
    const next = bytes[at + k] as number;
    if ((next & 0xc0) !== 0x80) return -1;
    code = (code << 6) | (next & 0x3f);
  }
  const surrogate = code >= 0xd800 && code <= 0xdfff;
  return code < (LEAST[length] as number) || code > 0x10ffff || surrogate ? -1 : code;
}
