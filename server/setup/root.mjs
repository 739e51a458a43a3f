import { fileURLToPath } from 'node:url';

/** The repository, however the command was called. */
export const ROOT = fileURLToPath(new URL('../../', import.meta.url)).replace(/\/$/, '');
