import { ownBucket } from './own-bucket.ts';

/** What the grid check shows about room and permanence. Null where the browser does not say. */
export interface PersistenceFacts {
  /** The browser promises not to clear this origin's data for lack of room. */
  readonly persisted: boolean;
  readonly usedBytes: number | null;
  readonly freeBytes: number | null;
  /** Hours of recording there is room for, the second copy included. */
  readonly freeHours: number | null;
}

/**
 * One hour on disk: two wheel channels at 100 Hz make 5 MB of blocks and ten fixes a second another 5 MB; twice, for database and
 * mirror; and as much again for the database's own housekeeping.
 */
const BYTES_PER_HOUR = 40_000_000;

/** Asks the browser to keep journals for good; it may ask the person, or decide by itself. */
export async function askPersistence(): Promise<PersistenceFacts> {
  const bucket = await ownBucket();
  await Promise.allSettled([navigator.storage.persist(), bucket?.persist()]);
  return persistenceFacts();
}

export async function persistenceFacts(): Promise<PersistenceFacts> {
  const bucket = await ownBucket();
  const [origin, own, estimate] = await Promise.all([
    navigator.storage.persisted().catch(() => false),
    bucket === null ? true : bucket.persisted().catch(() => false),
    navigator.storage.estimate().catch((): StorageEstimate => ({})),
  ]);
  const { usage = null, quota = null } = estimate;
  const free = usage === null || quota === null ? null : Math.max(0, quota - usage);
  return { persisted: origin && own, usedBytes: usage, freeBytes: free, freeHours: free === null ? null : free / BYTES_PER_HOUR };
}
