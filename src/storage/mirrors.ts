import type { KeptChunk } from './chunk-store.ts';
import { healDatabase, healMirror } from './heal.ts';
import type { JournalDatabase } from './journal-database.ts';
import type { StoredRun } from './journal-store.ts';
import type { MirrorFolder } from './mirror-file.ts';
import { MirrorJournal, type OpenMirror } from './mirror-journal.ts';
import type { StoredBlock } from './stored-block.ts';

/** A reloaded page is back before the browser has freed the files of its former self. */
const PATIENCE_MS = 300;
/** Worth waiting for: the mirror is all that is left of the run. */
const PATIENCE_WHEN_LOST_MS = 2000;

/**
 * The second copy, kept level with the database. It never stands in the way: whatever goes wrong with it is remembered as a
 * warning, and the database goes on alone.
 */
export class Mirrors {
  private readonly journal: MirrorJournal | null;
  /** What last went wrong, in words; null while all is well. */
  warning: string | null = null;
  readonly mended = new Set<string>();

  constructor(
    private readonly db: JournalDatabase,
    folder: MirrorFolder | null,
  ) {
    this.journal = folder === null ? null : new MirrorJournal(folder);
  }

  get present(): boolean {
    return this.journal !== null;
  }

  /** Makes database and mirror of a run alike; the longer valid one wins. Null for a run nobody holds. */
  level(runId: string): Promise<StoredRun | null> {
    return this.borrowing(runId, PATIENCE_MS, async (mirror) => {
      const copy = await this.quietly(async () => mirror?.content() ?? null);
      const run = await healDatabase(this.db, runId, copy);
      if (run?.recovered === 'mirror') this.mended.add(runId);
      await this.quietly(async () => {
        if (mirror !== null && run !== null) await healMirror(this.db, mirror, run);
        // Asking for a file makes it: of a run nobody holds none is left behind.
        if (mirror !== null && run === null && copy?.soundBytes === 0 && mirror.damagedTail().byteLength === 0) await this.remove(runId);
      });
      // Said for as long as this window lives: the start may have mended it before anyone read it.
      return run !== null && this.mended.has(runId) ? { ...run, recovered: 'mirror' } : run;
    });
  }

  /** Takes the block after the database did, or instead of it. The file stays in this window's hands until `release`. */
  async append(runId: string, block: StoredBlock): Promise<void> {
    await this.quietly(async () => {
      const mirror = await this.file(runId);
      if (mirror === null) return;
      if (mirror.blank) await this.level(runId);
      // It fell behind while it could not be written: the database has what is missing.
      if (mirror.end < block.firstSeq) mirror.append(await this.db.blocksOf(runId, mirror.end));
      mirror.append([block]);
      this.warning = null;
    });
  }

  async keepChunks(runId: string, chunks: readonly KeptChunk[]): Promise<void> {
    await this.borrowing(runId, 0, async (mirror) => void (await this.quietly(async () => mirror?.keepChunks(chunks))));
  }

  /** At the start: runs that the database lost, or holds less of, come back from their mirrors. Sealed ones are left alone. */
  async adopt(): Promise<void> {
    await this.quietly(async () => {
      for (const runId of (await this.journal?.runIds()) ?? []) {
        const row = await this.db.runs.get(runId);
        if (row?.progress.state !== 'safe on server') await this.adoptRun(runId, row === undefined);
      }
    });
  }

  private adoptRun(runId: string, lost: boolean): Promise<void> {
    return this.borrowing(runId, lost ? PATIENCE_WHEN_LOST_MS : PATIENCE_MS, async (mirror) => {
      if (mirror !== null && (lost || mirror.end > (await this.db.nextSeq(runId)))) await this.level(runId);
    });
  }

  release(runId: string): void {
    this.journal?.release(runId);
  }

  async remove(runId: string): Promise<void> {
    await this.quietly(async () => this.journal?.remove(runId));
  }

  /** Another window may record this run: a file that was not open before does not stay in this one's hands. */
  private async borrowing<T>(runId: string, patienceMs: number, work: (mirror: OpenMirror | null) => Promise<T>): Promise<T> {
    const mine = this.journal?.holds(runId) === true;
    const mirror = await this.file(runId, patienceMs);
    try {
      return await work(mirror);
    } finally {
      if (!mine) this.release(runId);
    }
  }

  private async file(runId: string, patienceMs = 0): Promise<OpenMirror | null> {
    return (await this.quietly(async () => (await this.journal?.of(runId, patienceMs)) ?? null)) ?? null;
  }

  private async quietly<T>(work: () => Promise<T>): Promise<T | null> {
    try {
      return await work();
    } catch (error) {
      this.warning = `The second copy of the journal cannot be written (${error instanceof Error ? error.message : String(error)}). Export the run after the finish.`;
      return null;
    }
  }
}
