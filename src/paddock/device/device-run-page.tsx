import { Link, useParams } from 'react-router';
import { EmptyState } from '#src/components/empty-state.tsx';
import { LocalRunSheet } from '#src/paddock/runs/local-run-sheet.tsx';
import { useLocalRuns } from './use-stored.ts';

/** A run sheet from this device alone, for whoever holds it. */
export function DeviceRunPage() {
  const { runId } = useParams();
  const runs = useLocalRuns();
  const local = runs?.find((run) => run.runId === runId);
  return (
    <main className="mx-auto max-w-6xl px-4 py-8 md:px-8">
      <p className="text-quiet">
        <Link className="underline underline-offset-4" to="/device">
          on this device
        </Link>
      </p>
      {local === undefined ? (
        runs === undefined ? null : (
          <EmptyState>This device holds no such run.</EmptyState>
        )
      ) : (
        <LocalRunSheet local={local} />
      )}
    </main>
  );
}
