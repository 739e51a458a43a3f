import { Link, Outlet } from 'react-router';
import { UpdatePrompt } from '#src/components/update-prompt.tsx';
import { useOnline } from '#src/paddock/parts/use-online.ts';
import { RequireSignIn, useSignedIn } from '#src/paddock/signed-in.tsx';
import { Rail } from './rail.tsx';
import { ThemeChoice } from './theme-choice.tsx';

/** Rail, one page, and what must be known on every page: no connection, a newer version. */
export function Shell() {
  return (
    <RequireSignIn>
      <div className="md:grid md:min-h-dvh md:grid-cols-[13rem_1fr] print:block">
        <div className="md:border-hair md:flex md:flex-col md:border-r md:py-8 print:hidden">
          <div className="hidden px-5 pb-8 md:block">
            <p className="font-figure text-quiet">evenline</p>
          </div>
          <Rail />
          <div className="mt-auto hidden gap-4 px-5 md:grid">
            <Link to="/device" className="text-quiet text-sm underline underline-offset-4">
              on this device
            </Link>
            <ThemeChoice />
          </div>
        </div>
        <div className="min-w-0 pb-24 md:pb-8 print:pb-0">
          <UpdatePrompt />
          <Offline />
          <main className="mx-auto max-w-6xl px-4 pt-6 md:px-8 md:pt-8 print:p-0">
            <TeamName />
            <Outlet />
          </main>
        </div>
      </div>
    </RequireSignIn>
  );
}

function TeamName() {
  const { team, teams, chooseTeam } = useSignedIn();
  if (teams.length === 1) return <p className="text-quiet print:hidden">{team.name}</p>;
  return (
    <label className="text-quiet flex items-center gap-2 print:hidden">
      team
      <select
        className="rounded-paddock border-quiet bg-ground text-ink min-h-9 border px-2"
        value={team.id}
        onChange={(event) => chooseTeam(event.target.value)}
      >
        {teams.map(({ id, name }) => (
          <option key={id} value={id}>
            {name}
          </option>
        ))}
      </select>
    </label>
  );
}

function Offline() {
  if (useOnline()) return null;
  return (
    <p role="status" className="bg-pool px-4 py-2 md:px-8 print:hidden">
      No connection. You see what this device kept; the cockpit and its journal need none.
    </p>
  );
}
