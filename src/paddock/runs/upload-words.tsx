import { Button } from '#src/components/button.tsx';
import { JournalState } from '#src/components/journal-state.tsx';
import { useOutbox } from '#src/paddock/device/outbox-context.ts';
import { usePendingRuns } from '#src/paddock/device/use-stored.ts';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';

/** Where this device's journal is; blocked ones with the reason and one more try. */
export function UploadWords({ run }: { readonly run: StoredRunSummary }) {
  const outbox = useOutbox();
  const progress = usePendingRuns()?.find(({ runId }) => runId === run.runId)?.progress;
  return (
    <span className="grid justify-items-start gap-1">
      <JournalState state={run.upload} />
      {run.ended || run.upload === 'safe on server' ? null : (
        <span className="text-quiet text-sm">not ended yet; it is sent when the run has ended</span>
      )}
      {progress?.blocked === null || progress?.blocked === undefined ? null : (
        <>
          <span className="max-w-prose text-sm">{progress.blocked.message}</span>
          <Button onClick={() => outbox?.retryBlocked(run.runId)}>try again</Button>
        </>
      )}
    </span>
  );
}
