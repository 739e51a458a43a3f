import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits, for cookies and upload grants. Only its hash is ever stored. */
export const newToken = (): string => randomBytes(32).toString('base64url');

export const sha256Hex = (data: string | Uint8Array): string => createHash('sha256').update(data).digest('hex');
