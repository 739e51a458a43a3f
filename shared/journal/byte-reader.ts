/** Reads what `ByteWriter` wrote. Running past the end never throws: `short` becomes and stays true. */
export class ByteReader {
  readonly bytes: Uint8Array;
  readonly end: number;
  private position: number;

  constructor(bytes: Uint8Array, from: number, end: number) {
    this.bytes = bytes;
    this.position = from;
    this.end = end;
  }

  get at(): number {
    return this.position;
  }

  get done(): boolean {
    return this.position >= this.end;
  }

  get short(): boolean {
    return this.position > this.end;
  }

  byte(): number {
    return this.bytes[this.position++] as number;
  }

  unsigned(): number {
    const bytes = this.bytes;
    let at = this.position;
    let value = 0;
    let factor = 1;
    let next = 0x80;
    // Behind the last byte `next` is undefined, whose comparison ends the loop: `short` then tells.
    while (next >= 0x80 && factor < BEYOND) {
      next = bytes[at++] as number;
      value += (next & 0x7f) * factor;
      factor *= 0x80;
    }
    this.position = at;
    return value;
  }

  signed(): number {
    const bytes = this.bytes;
    let at = this.position;
    // One to four bytes are nearly all of a journal: they stay in the machine's whole numbers.
    let next = bytes[at++] as number;
    let value = next & 0x7f;
    for (let shift = 7; next >= 0x80 && shift < 28; shift += 7) {
      next = bytes[at++] as number;
      value |= (next & 0x7f) << shift;
    }
    if (next >= 0x80) {
      const long = this.unsigned();
      return long % 2 === 0 ? long / 2 : -(long + 1) / 2;
    }
    this.position = at;
    return (value >>> 1) ^ -(value & 1);
  }

  skip(length: number): void {
    this.position += length;
  }

  moveTo(position: number): void {
    this.position = position;
  }
}

/** Eight groups of seven bits reach 2^56; a writer stops at 2^53. */
const BEYOND = 2 ** 56;

export function readU32(bytes: Uint8Array, at: number): number {
  const low = (bytes[at] as number) | ((bytes[at + 1] as number) << 8) | ((bytes[at + 2] as number) << 16);
  return (low | ((bytes[at + 3] as number) << 24)) >>> 0;
}
