import { useMutation, useQueryClient } from '@tanstack/react-query';
import { createPracticeEvent } from '#src/api/events/create-practice-event.ts';
import { keys } from '#src/api/query-keys.ts';
import { Button } from '#src/components/button.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { useSignedIn } from '#src/paddock/signed-in.tsx';

/** The one act that fills an empty team: an invented course, class, car, entry and attempt. */
export function PracticeEventButton() {
  const client = useQueryClient();
  const { user, team } = useSignedIn();
  const create = useMutation({
    mutationFn: () => createPracticeEvent(team.id),
    onSettled: () => client.invalidateQueries({ queryKey: keys.user(user.id) }),
  });
  return (
    <div className="grid gap-3">
      <div>
        <Button kind="main" busy={create.isPending} onClick={() => create.mutate()}>
          make a practice event
        </Button>
      </div>
      {create.isError ? <FailureNotice error={create.error} /> : null}
    </div>
  );
}
