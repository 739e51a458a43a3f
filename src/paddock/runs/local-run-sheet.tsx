import { useMemo } from 'react';
import { EmptyState } from '#src/components/empty-state.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';
import { ExportJournalButton } from './export-journal-button.tsx';
import { RunSheetView } from './run-sheet-view.tsx';
import { runTitle, sheetPlace } from './sheet-place.ts';
import { UploadWords } from './upload-words.tsx';
import { useLocalSheet } from './use-local-run.ts';

/** The run sheet of a run that lies on this device, whether or not the server has it. */
export function LocalRunSheet({ local }: { readonly local: StoredRunSummary }) {
  const { pack, attemptId } = local.header;
  const derived = useLocalSheet(local.runId, local.nextSeq);
  const place = useMemo(() => sheetPlace(pack), [pack]);
  return (
    <>
      <PageTitle acts={<ExportJournalButton runId={local.runId} />}>Run sheet</PageTitle>
      <p className="text-quiet -mt-3 mb-4">
        {runTitle(pack)}. Derived on this device from its own journal{local.header.practice ? '; practice' : ''}.
      </p>
      <div className="mb-6 flex flex-wrap items-center gap-6">
        <UploadWords run={local} />
        {local.ended ? null : (
          <a className="underline underline-offset-4" href={`/cockpit/${attemptId}`}>
            open in the cockpit
          </a>
        )}
      </div>
      {derived.isError ? <FailureNotice error={derived.error} /> : null}
      {derived.data?.run.damage === null || derived.data?.run.damage === undefined ? null : (
        <FaultNotice>{derived.data.run.damage}</FaultNotice>
      )}
      {derived.data === null ? <EmptyState>This device does not hold the journal of this run.</EmptyState> : null}
      {derived.data === undefined || derived.data === null ? null : <RunSheetView sheet={derived.data.sheet} place={place} />}
    </>
  );
}
