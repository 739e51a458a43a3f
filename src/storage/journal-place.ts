import type { BackendPlace } from './journal-backend.ts';
import { JournalDatabase } from './journal-database.ts';
import { opfsMirror } from './opfs-mirror.ts';
import { ownBucket } from './own-bucket.ts';

/**
 * Where journals lie in this browser. A Storage Bucket of its own outlives the loss of the origin's default database, which one
 * kill at the wrong moment can cause; browsers without buckets get the default database, and the facts say so.
 */
export async function journalPlace(): Promise<BackendPlace> {
  const bucket = await ownBucket();
  const factory = { indexedDB: bucket?.indexedDB ?? indexedDB, IDBKeyRange };
  return { db: new JournalDatabase(factory), folder: await opfsMirror(), database: bucket === null ? 'default' : 'own bucket' };
}
