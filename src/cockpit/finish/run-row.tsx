import { attemptPath, runSheetPath } from '#src/cockpit/cockpit-path.ts';
import { JournalState } from '#src/components/journal-state.tsx';
import type { JournalStore, StoredRunSummary } from '#src/storage/journal-store.ts';
import { ExportKey } from './export-key.tsx';
import { exportRun } from './export-run.ts';

/** One run on this device: go on with it, or take its journal away. */
export function RunRow({ run, store }: { readonly run: StoredRunSummary; readonly store: JournalStore }) {
  const { pack, practice, createdMs } = run.header;
  const when = new Intl.DateTimeFormat('en-GB', { timeZone: pack.event.timeZone, dateStyle: 'medium', timeStyle: 'short' }).format(
    createdMs,
  );
  return (
    <div className="shell-row">
      <span>
        <strong>
          {pack.event.name}, car {pack.entry.number}
          {practice ? ', practice' : ''}
        </strong>
        <span className="quiet">
          {when} <JournalState state={run.upload} />
        </span>
      </span>
      {run.ended ? (
        <>
          <a className="key" href={runSheetPath(run.runId)}>
            run sheet
          </a>
          <ExportKey save={() => exportRun(store, run.runId)} />
        </>
      ) : (
        <a className="key key-main" href={attemptPath(run.header.attemptId)}>
          go on with this run
        </a>
      )}
    </div>
  );
}
