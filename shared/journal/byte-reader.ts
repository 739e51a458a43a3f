/** Reads what `ByteWriter` wrote. Running past the end never throws: it sets `short` and gives zeros. */
export class ByteReader {
  short = false;

  constructor(
    private readonly bytes: Uint8Array,
    public at: number,
    private readonly end: number,
  ) {}

  get done(): boolean {
    return this.at >= this.end;
  }

  byte(): number {
    if (this.at < this.end) return this.bytes[this.at++] as number;
    this.short = true;
    return 0;
  }

  unsigned(): number {
    let value = 0;
    // Four groups of seven bits fit in the fast integers of the machine; longer numbers go on in floating point.
    for (let shift = 0; shift < 28; shift += 7) {
      const next = this.byte();
      value |= (next & 0x7f) << shift;
      if (next < 0x80) return value;
    }
    let factor = 2 ** 28;
    for (let group = 4; group < 8; group++) {
      const next = this.byte();
      value += (next & 0x7f) * factor;
      if (next < 0x80) return value;
      factor *= 0x80;
    }
    // A ninth group would leave the whole numbers behind: no writer makes one.
    this.short = true;
    return 0;
  }

  signed(): number {
    const value = this.unsigned();
    if (value <= 0x7fffffff) return (value >>> 1) ^ -(value & 1);
    return value % 2 === 0 ? value / 2 : -(value + 1) / 2;
  }

  skip(length: number): void {
    if (this.at + length > this.end) this.short = true;
    this.at = Math.min(this.at + length, this.end);
  }
}

export function readU32(bytes: Uint8Array, at: number): number {
  const [a = 0, b = 0, c = 0, d = 0] = [bytes[at], bytes[at + 1], bytes[at + 2], bytes[at + 3]];
  return (a | (b << 8) | (c << 16) | (d << 24)) >>> 0;
}
