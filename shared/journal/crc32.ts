/** The standard CRC-32 (reflected polynomial 0xEDB88320). Source: ITU-T V.42 / IEEE 802.3. */

const TABLES = makeTables();

/** Eight tables, so that eight bytes are taken at a step: a journal of an hour is checked in a few milliseconds. */
function makeTables(): readonly Int32Array[] {
  const tables = Array.from({ length: 8 }, () => new Int32Array(256));
  const first = tables[0] as Int32Array;
  for (let n = 0; n < 256; n++) {
    let c = n;
    for (let bit = 0; bit < 8; bit++) c = c & 1 ? 0xedb88320 ^ (c >>> 1) : c >>> 1;
    first[n] = c;
  }
  for (let t = 1; t < 8; t++) {
    const before = tables[t - 1] as Int32Array;
    const table = tables[t] as Int32Array;
    for (let n = 0; n < 256; n++) {
      const c = before[n] as number;
      table[n] = (first[c & 0xff] as number) ^ (c >>> 8);
    }
  }
  return tables;
}

const [T0, T1, T2, T3, T4, T5, T6, T7] = TABLES as [
  Int32Array,
  Int32Array,
  Int32Array,
  Int32Array,
  Int32Array,
  Int32Array,
  Int32Array,
  Int32Array,
];

/** CRC-32 of `bytes[from..to)`, 0..2^32-1. `crc32` of the ASCII text "123456789" is 0xcbf43926. */
export function crc32(bytes: Uint8Array, from = 0, to = bytes.length): number {
  let crc = -1;
  let i = from;
  for (; i + 8 <= to; i += 8) {
    const low =
      crc ^ ((bytes[i] as number) | ((bytes[i + 1] as number) << 8) | ((bytes[i + 2] as number) << 16) | ((bytes[i + 3] as number) << 24));
    crc =
      (T7[low & 0xff] as number) ^
      (T6[(low >>> 8) & 0xff] as number) ^
      (T5[(low >>> 16) & 0xff] as number) ^
      (T4[low >>> 24] as number) ^
      (T3[bytes[i + 4] as number] as number) ^
      (T2[bytes[i + 5] as number] as number) ^
      (T1[bytes[i + 6] as number] as number) ^
      (T0[bytes[i + 7] as number] as number);
  }
  for (; i < to; i++) crc = (T0[(crc ^ (bytes[i] as number)) & 0xff] as number) ^ (crc >>> 8);
  return (crc ^ -1) >>> 0;
}
