import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router';
import { runsQuery } from '#src/api/runs/list-runs.ts';
import { EmptyState } from '#src/components/empty-state.tsx';
import { JournalState } from '#src/components/journal-state.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { sureDigits } from '#src/components/sure-text.ts';
import { useLocalRuns } from '#src/paddock/device/use-stored.ts';
import { MAIN_LINK } from '#src/paddock/event/next-thing-field.tsx';
import { Cell, DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { timeErrorText } from '#src/paddock/parts/time-error.tsx';
import { clockInZone, formatDay } from '#src/paddock/parts/when.ts';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import { type RunRow, runRows } from './run-rows.ts';
import { STATUS_WORDS } from './run-words.ts';
import { UploadWords } from './upload-words.tsx';

export function RunsPage() {
  const { user, team } = useSignedIn();
  const server = useQuery(runsQuery(user.id, team.id));
  const local = useLocalRuns() ?? [];
  return (
    <>
      <PageTitle>Runs</PageTitle>
      {server.data === undefined && local.length > 0 ? <RunTable rows={runRows([], local, team.id)} /> : null}
      <Loaded query={server}>{({ runs }) => <RunTable rows={runRows(runs, local, team.id)} />}</Loaded>
    </>
  );
}

function RunTable({ rows }: { readonly rows: readonly RunRow[] }) {
  if (rows.length === 0) {
    return (
      <EmptyState
        act={
          <Link className={MAIN_LINK} to="/event">
            prepare an attempt
          </Link>
        }
      >
        Your runs will stand here, each with its time error and whether its journal is on this device or safe on the server.
      </EmptyState>
    );
  }
  return (
    <DataTable
      caption="runs, newest first"
      head={[
        { name: 'run' },
        { name: 'finish', unit: 'seconds', figures: true },
        { name: 'sure to', unit: '± s', figures: true, wide: true },
        { name: 'outcome' },
        { name: 'journal', wide: true },
      ]}
    >
      {rows.map((row) => (
        <Run key={row.id} row={row} />
      ))}
    </DataTable>
  );
}

function Run({ row }: { readonly row: RunRow }) {
  const { server } = row;
  return (
    <Row>
      <RowHead>
        <Link className="font-bold underline underline-offset-4" to={`/runs/${row.id}`}>
          {row.eventName}, number {row.entryNumber}, attempt {row.attemptNumber}
        </Link>
        <span className="text-quiet block text-sm">
          {row.carName}; {formatDay(row.createdMs, row.timeZone)}, {clockInZone(row.createdMs, row.timeZone)}
        </span>
      </RowHead>
      <FigureCell>{server?.finish ? timeErrorText(server.finish.timeErrorS, 2) : null}</FigureCell>
      <FigureCell wide>{server?.finish ? sureDigits(server.finish.sigmaS) : null}</FigureCell>
      <Cell>
        {outcomeWords(row)}
        {server?.counts === true ? <span className="block font-bold">this run counts</span> : null}
        {row.practice ? <span className="text-quiet block text-sm">practice</span> : null}
        <span className="block md:hidden">
          <Journal row={row} />
        </span>
      </Cell>
      <Cell wide>
        <Journal row={row} />
      </Cell>
    </Row>
  );
}

/** Beside the outcome on a phone, in a column of its own elsewhere. */
function Journal({ row }: { readonly row: RunRow }) {
  return row.local === null ? <JournalState state="safe on server" /> : <UploadWords run={row.local} />;
}

function outcomeWords({ server, local }: RunRow): string {
  if (server !== null) return server.outcome ?? STATUS_WORDS[server.status];
  return local?.ended === true ? 'ended' : 'open';
}
