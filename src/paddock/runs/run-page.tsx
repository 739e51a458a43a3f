import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useParams } from 'react-router';
import type { RunResponse } from '#shared/api/runs.ts';
import { runQuery } from '#src/api/runs/get-run.ts';
import { journalAddress } from '#src/api/runs/journal-address.ts';
import { EmptyState } from '#src/components/empty-state.tsx';
import { JournalState } from '#src/components/journal-state.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { useLocalRuns } from '#src/paddock/device/use-stored.ts';
import { PLAIN_LINK } from '#src/paddock/event/next-thing-field.tsx';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';
import { Counting } from './counting.tsx';
import { ExportJournalButton } from './export-journal-button.tsx';
import { LocalRunSheet } from './local-run-sheet.tsx';
import { RunSheetView } from './run-sheet-view.tsx';
import { STATUS_WORDS } from './run-words.ts';
import { runTitle, sheetPlace } from './sheet-place.ts';
import { UploadWords } from './upload-words.tsx';

/** The server's run sheet where there is one, else this device's own. */
export function RunPage() {
  const { runId = '' } = useParams();
  const { user } = useSignedIn();
  const locals = useLocalRuns();
  const local = locals?.find((run) => run.runId === runId);
  const sentOrForeign = locals !== undefined && (local === undefined || local.upload !== 'on this device');
  const server = useQuery({ ...runQuery(user.id, runId), enabled: sentOrForeign });
  if (local !== undefined && !server.data?.sheet) return <LocalRunSheet local={local} />;
  if (locals === undefined && server.data === undefined) return null;
  return <Loaded query={server}>{(data) => <ServerRun data={data} local={local} />}</Loaded>;
}

function ServerRun({ data, local }: { readonly data: RunResponse; readonly local: StoredRunSummary | undefined }) {
  const { run, sheet, failure, pack } = data;
  const place = useMemo(() => sheetPlace(pack), [pack]);
  return (
    <>
      <PageTitle
        acts={
          <>
            <Counting run={run} />
            {run.status !== 'receiving' ? (
              <a className={PLAIN_LINK} href={journalAddress(run.id)} download>
                download journal
              </a>
            ) : local === undefined ? null : (
              <ExportJournalButton runId={run.id} />
            )}
          </>
        }
      >
        Run sheet
      </PageTitle>
      <p className="text-quiet -mt-3 mb-4">
        {runTitle(pack)}: {run.courseBookName}, {run.raceClassName}, {run.carName}
        {run.practice ? '; practice' : ''}.
      </p>
      <div className="mb-6">
        {local === undefined ? (
          <JournalState state={run.status === 'receiving' ? 'sending' : 'safe on server'} />
        ) : (
          <UploadWords run={local} />
        )}
      </div>
      {failure === null ? null : (
        <FaultNotice>The run sheet could not be derived: {failure.message} The journal itself is safe on the server.</FaultNotice>
      )}
      {sheet !== null ? (
        <RunSheetView sheet={sheet} place={place} />
      ) : failure === null ? (
        <EmptyState>The run sheet will stand here: {STATUS_WORDS[run.status]}.</EmptyState>
      ) : null}
    </>
  );
}
