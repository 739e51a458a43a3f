import { ok, type Result } from '#shared/result.ts';
import type { JournalDatabase } from './journal-database.ts';
import { failureOf, isClosed } from './storage-fault.ts';
import type { StorageFailure } from './stored-block.ts';

/** Runs `work` and makes failures values. A database that the browser or another window closed is opened again, once. */
export async function guarded<T>(db: JournalDatabase, work: () => Promise<T>): Promise<Result<T, StorageFailure>> {
  try {
    return ok(await work());
  } catch (error) {
    if (!isClosed(error)) return { ok: false, error: failureOf(error) };
  }
  try {
    db.close({ disableAutoOpen: false });
    await db.open();
    return ok(await work());
  } catch (error) {
    return { ok: false, error: failureOf(error) };
  }
}
