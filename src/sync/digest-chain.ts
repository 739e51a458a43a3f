/** Chain over chunks: SHA-256(previous digest ‖ bytes), the first previous being 32 zero bytes. Hex, as the header carries it. */

export type Sha256 = (bytes: Uint8Array<ArrayBuffer>) => Promise<Uint8Array<ArrayBuffer>>;

export const FIRST_DIGEST = '0'.repeat(64);

export const subtleSha256: Sha256 = async (bytes) => new Uint8Array(await crypto.subtle.digest('SHA-256', bytes));

export async function chainDigest(previous: string, bytes: Uint8Array, sha256: Sha256): Promise<string> {
  const joined = new Uint8Array(32 + bytes.byteLength);
  joined.set(fromHex(previous));
  joined.set(bytes, 32);
  return toHex(await sha256(joined));
}

function fromHex(hex: string): Uint8Array {
  return Uint8Array.from({ length: hex.length / 2 }, (_, i) => Number.parseInt(hex.slice(2 * i, 2 * i + 2), 16));
}

function toHex(bytes: Uint8Array): string {
  return Array.from(bytes, (b) => b.toString(16).padStart(2, '0')).join('');
}
