/** The part of the Storage Buckets API that is used (WICG storage-buckets; Chromium 122 and later). */
interface StorageBucket {
  readonly indexedDB: IDBFactory;
  persist(): Promise<boolean>;
  persisted(): Promise<boolean>;
}
interface BucketNavigator {
  readonly storageBuckets?: { open(name: string, options: { durability: 'strict'; persisted: boolean }): Promise<StorageBucket> };
}

/** The bucket that holds the database of journals; null where the browser has none. Always asked for in the same way. */
export async function ownBucket(): Promise<StorageBucket | null> {
  const buckets = (navigator as BucketNavigator).storageBuckets;
  if (buckets === undefined) return null;
  try {
    return await buckets.open('evenline-journal', { durability: 'strict', persisted: true });
  } catch {
    return null;
  }
}
