/** Grows as it is written. Integers are little-endian. */
export class ByteWriter {
  private bytes = new Uint8Array(512);
  length = 0;

  byte(value: number): void {
    this.room(1);
    this.bytes[this.length++] = value;
  }

  u32(value: number): void {
    this.room(4);
    this.putU32(this.length, value);
    this.length += 4;
  }

  putU32(at: number, value: number): void {
    this.bytes[at] = value;
    this.bytes[at + 1] = value >>> 8;
    this.bytes[at + 2] = value >>> 16;
    this.bytes[at + 3] = value >>> 24;
  }

  /** Seven bits a byte, least first, the top bit says that more follow. `value` is a whole number in 0..2^53-1. */
  unsigned(value: number): void {
    this.room(8);
    let rest = value;
    while (rest >= 0x80) {
      this.bytes[this.length++] = (rest % 0x80) | 0x80;
      rest = Math.floor(rest / 0x80);
    }
    this.bytes[this.length++] = rest;
  }

  /** Zigzag (0, -1, 1, -2 … become 0, 1, 2, 3 …), then `unsigned`. Magnitude below 2^52. */
  signed(value: number): void {
    this.unsigned(value >= 0 ? value * 2 : -value * 2 - 1);
  }

  append(part: Uint8Array): void {
    this.room(part.length);
    this.bytes.set(part, this.length);
    this.length += part.length;
  }

  view(): Uint8Array {
    return this.bytes.subarray(0, this.length);
  }

  private room(more: number): void {
    if (this.length + more <= this.bytes.length) return;
    const bigger = new Uint8Array(Math.max(this.bytes.length * 2, this.length + more));
    bigger.set(this.view());
    this.bytes = bigger;
  }
}
