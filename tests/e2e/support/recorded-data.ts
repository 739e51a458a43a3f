import { existsSync } from 'node:fs';
import { resolve } from 'node:path';

/** Recordings lie beside the repository and are no part of it; tests that need them skip where they are absent. */
export const RECORDED = resolve(process.cwd(), '..', 'shared', 'data');
export const hasRecorded = existsSync(RECORDED);
export const recorded = (path: string): string => resolve(RECORDED, path);
/** For the name of a suite, so that a skipped one says why. */
export const recordedNote = hasRecorded ? '' : ' (skipped: no recordings at ../shared/data)';
