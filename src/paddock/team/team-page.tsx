import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { Link, useNavigate } from 'react-router';
import { signOut } from '#src/api/auth/sign-out.ts';
import { teamQuery } from '#src/api/teams/get-team.ts';
import { Button } from '#src/components/button.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { CACHE_KEY } from '#src/paddock/cache/offline-cache.ts';
import { useLocalRuns } from '#src/paddock/device/use-stored.ts';
import { Cell, DataTable, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { ThemeChoice } from '#src/paddock/shell/theme-choice.tsx';
import { useSignedIn } from '#src/paddock/signed-in.tsx';

export function TeamPage() {
  const { user, team } = useSignedIn();
  const members = useQuery(teamQuery(user.id, team.id));
  return (
    <>
      <PageTitle>Team</PageTitle>
      <Loaded query={members}>
        {(data) => (
          <section className="mb-10 max-w-2xl">
            <h2 className="mb-2 text-2xl font-bold">{data.team.name}</h2>
            <DataTable caption="members" head={[{ name: 'member' }, { name: 'role' }]}>
              {data.members.map((member) => (
                <Row key={member.userId}>
                  <RowHead>
                    {member.name}
                    {member.userId === user.id ? <span className="text-quiet"> (you)</span> : null}
                  </RowHead>
                  <Cell>{member.role}</Cell>
                </Row>
              ))}
            </DataTable>
          </section>
        )}
      </Loaded>
      <section className="grid max-w-2xl gap-4">
        <h2 className="text-2xl font-bold">This device</h2>
        <p>
          Signed in as {user.name}, {user.email}.
        </p>
        <div className="grid gap-4 md:hidden">
          <Link to="/device" className="underline underline-offset-4">
            runs and packs on this device
          </Link>
          <ThemeChoice />
        </div>
        <SignOut />
      </section>
    </>
  );
}

/** Clears what was kept for this person; journals and packs stay, and go on being sent by their grants. */
function SignOut() {
  const client = useQueryClient();
  const navigate = useNavigate();
  const unsafe = useLocalRuns()?.filter(({ upload }) => upload !== 'safe on server').length ?? 0;
  const leave = useMutation({
    mutationFn: signOut,
    onSuccess: async () => {
      client.clear();
      localStorage.removeItem(CACHE_KEY);
      await navigate('/sign-in', { replace: true });
    },
  });
  return (
    <div className="grid gap-3">
      {unsafe === 0 ? null : (
        <p className="border-quiet border-l-4 pl-3">
          {unsafe === 1 ? 'One run is' : `${unsafe} runs are`} not safe on the server yet. Signing out loses nothing: what is recorded stays
          on this device and goes on being sent.
        </p>
      )}
      {leave.isError ? <FailureNotice error={leave.error} /> : null}
      <div>
        <Button busy={leave.isPending} onClick={() => leave.mutate()}>
          sign out
        </Button>
      </div>
    </div>
  );
}
