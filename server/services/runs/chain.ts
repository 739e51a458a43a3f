import { createHash } from 'node:crypto';

/** SHA-256(previous digest ‖ bytes), hex. The first previous digest is 32 zero bytes. */
export const chainDigest = (previous: string, bytes: Uint8Array): string =>
  createHash('sha256').update(Buffer.from(previous, 'hex')).update(bytes).digest('hex');
