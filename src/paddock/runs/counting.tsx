import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { RunSummary } from '#shared/api/runs.ts';
import { keys } from '#src/api/query-keys.ts';
import { setCountingRun } from '#src/api/runs/set-counting-run.ts';
import { Button } from '#src/components/button.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { useSignedIn } from '#src/paddock/signed-in.tsx';

/** Two tablets make two runs; the entry names the one that counts. */
export function Counting({ run }: { readonly run: RunSummary }) {
  const client = useQueryClient();
  const { user, team } = useSignedIn();
  const choose = useMutation({
    mutationFn: () => setCountingRun(run.entryId, run.id),
    onSuccess: () => client.invalidateQueries({ queryKey: keys.user(user.id) }),
  });
  if (run.practice) return null;
  if (run.counts) return <p className="min-h-11 content-center font-bold">this run counts</p>;
  if (run.status === 'receiving' || (team.role !== 'manager' && team.role !== 'navigator')) return null;
  return (
    <span className="grid gap-2">
      <Button busy={choose.isPending} onClick={() => choose.mutate()}>
        let this run count
      </Button>
      {choose.isError ? <FailureNotice error={choose.error} /> : null}
    </span>
  );
}
