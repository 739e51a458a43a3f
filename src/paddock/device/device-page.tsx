import { useMutation } from '@tanstack/react-query';
import { Link } from 'react-router';
import { Button } from '#src/components/button.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { PLAIN_LINK } from '#src/paddock/event/next-thing-field.tsx';
import { packBytes } from '#src/paddock/event/store-pack.ts';
import { Cell, DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { useNow } from '#src/paddock/parts/use-now.ts';
import { dayAndClock, relativeAge } from '#src/paddock/parts/when.ts';
import { ExportJournalButton } from '#src/paddock/runs/export-journal-button.tsx';
import { fromDevice } from '#src/paddock/runs/run-rows.ts';
import { UploadWords } from '#src/paddock/runs/upload-words.tsx';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { useDevice } from './device-storage.ts';
import { useLocalRuns, usePacks } from './use-stored.ts';

/** Everything this device holds, for whoever holds it: no sign-in, no connection. */
export function DevicePage() {
  const device = useDevice();
  const runs = useLocalRuns();
  const packs = usePacks();
  return (
    <main className="mx-auto max-w-6xl px-4 py-8 md:px-8">
      <p className="text-quiet">
        <Link className="underline underline-offset-4" to="/event">
          to the paddock
        </Link>
      </p>
      <PageTitle>On this device</PageTitle>
      {device.state === 'failed' ? <FaultNotice>{device.message}</FaultNotice> : null}
      <h2 className="mb-2 text-2xl font-bold">Runs</h2>
      {runs === undefined ? null : <Runs runs={[...runs].sort((a, b) => b.header.createdMs - a.header.createdMs)} />}
      <h2 className="mt-10 mb-2 text-2xl font-bold">Packs</h2>
      {packs === undefined ? null : <Packs packs={packs} />}
    </main>
  );
}

function Runs({ runs }: { readonly runs: readonly StoredRunSummary[] }) {
  if (runs.length === 0) return <EmptyState>Runs recorded on this device will stand here until they are removed.</EmptyState>;
  return (
    <DataTable
      caption="runs on this device"
      head={[{ name: 'run' }, { name: 'observations', figures: true, wide: true }, { name: 'journal', wide: true }, { name: 'acts' }]}
    >
      {runs.map((run) => {
        const row = fromDevice(run);
        return (
          <Row key={run.runId}>
            <RowHead>
              <Link className="font-bold underline underline-offset-4" to={`/device/${run.runId}`}>
                {row.eventName}, number {row.entryNumber}, attempt {row.attemptNumber}
              </Link>
              <span className="text-quiet block text-sm">
                {dayAndClock(row.createdMs, row.timeZone)}
                {row.practice ? '; practice' : ''}
              </span>
            </RowHead>
            <FigureCell wide>{String(run.nextSeq)}</FigureCell>
            <Cell wide>
              <UploadWords run={run} />
            </Cell>
            <Cell>
              <span className="mb-2 block md:hidden">
                <UploadWords run={run} />
              </span>
              <span className="flex flex-wrap gap-2">
                <ExportJournalButton runId={run.runId} />
                {run.upload === 'safe on server' ? <RemoveRun runId={run.runId} /> : null}
              </span>
            </Cell>
          </Row>
        );
      })}
    </DataTable>
  );
}

/** Offered only once the server has sealed the run; storage refuses anything else. */
function RemoveRun({ runId }: { readonly runId: string }) {
  const device = useDevice();
  const remove = useMutation({
    networkMode: 'always',
    mutationFn: async () => {
      if (device.state !== 'open') return;
      const removed = await device.storage.journals.removeRun(runId);
      if (!removed.ok) throw new Error(removed.error.message);
    },
  });
  return (
    <span className="grid gap-2">
      <Button kind="bare" busy={remove.isPending} onClick={() => remove.mutate()}>
        remove from this device
      </Button>
      {remove.isError ? <FailureNotice error={remove.error} /> : null}
    </span>
  );
}

function Packs({ packs }: { readonly packs: readonly StoredPack[] }) {
  const now = useNow();
  if (packs.length === 0)
    return <EmptyState>Packs stored on this device will stand here, each opening its cockpit with no connection.</EmptyState>;
  return (
    <DataTable
      caption="packs on this device"
      head={[
        { name: 'attempt' },
        { name: 'version', wide: true },
        { name: 'size', unit: 'kB', figures: true, wide: true },
        { name: 'stored' },
        { name: 'acts' },
      ]}
    >
      {packs.map((stored) => (
        <Row key={stored.attemptId}>
          <RowHead>
            {stored.pack.event.name}, number {stored.pack.entry.number}, attempt {stored.pack.attempt.number}
          </RowHead>
          <Cell wide className="font-figure">
            {stored.digest.slice(0, 8)}
          </Cell>
          <FigureCell wide>{(packBytes(stored) / 1000).toFixed(1)}</FigureCell>
          <Cell>{relativeAge(stored.storedMs, now)}</Cell>
          <Cell>
            <a className={PLAIN_LINK} href={`/cockpit/${stored.attemptId}`}>
              open cockpit
            </a>
          </Cell>
        </Row>
      ))}
    </DataTable>
  );
}
