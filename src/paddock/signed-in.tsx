import { useQuery } from '@tanstack/react-query';
import { createContext, type ReactNode, useContext, useState } from 'react';
import { Navigate, useLocation } from 'react-router';
import type { MeResponse } from '#shared/api/auth.ts';
import { meQuery } from '#src/api/auth/get-me.ts';
import { Loaded } from './parts/loaded.tsx';

/** Who is signed in and for which of their teams the pages speak. */
export interface SignedIn {
  readonly user: MeResponse['user'];
  readonly teams: MeResponse['teams'];
  readonly team: MeResponse['teams'][number];
  readonly chooseTeam: (teamId: string) => void;
}

const Context = createContext<SignedIn | null>(null);
const TEAM_KEY = 'evenline.team';

export function useSignedIn(): SignedIn {
  const signedIn = useContext(Context);
  if (signedIn === null) throw new Error('useSignedIn outside of RequireSignIn');
  return signedIn;
}

/** Nobody signed in: on to the sign-in page, and back here afterwards. A lost connection is not a lost sign-in. */
export function RequireSignIn({ children }: { readonly children: ReactNode }) {
  const me = useQuery(meQuery());
  const { pathname } = useLocation();
  if (me.data === null || (me.data === undefined && isSignedOut(me.error)))
    return <Navigate to="/sign-in" replace state={{ from: pathname }} />;
  if (!me.data) return <Loaded query={me}>{() => null}</Loaded>;
  return <WithTeam me={me.data}>{children}</WithTeam>;
}

const isSignedOut = (error: Error | null): boolean => error !== null && 'code' in error && error.code === 'SIGN_IN_REQUIRED';

function WithTeam({ me, children }: { readonly me: MeResponse; readonly children: ReactNode }) {
  const [chosen, setChosen] = useState(() => localStorage.getItem(TEAM_KEY));
  const team = me.teams.find(({ id }) => id === chosen) ?? me.teams.find(({ kind }) => kind === 'crew') ?? me.teams[0];
  if (team === undefined) return <p className="p-6">You belong to no team. Ask a manager to add you.</p>;
  const chooseTeam = (teamId: string) => {
    localStorage.setItem(TEAM_KEY, teamId);
    setChosen(teamId);
  };
  return <Context value={{ user: me.user, teams: me.teams, team, chooseTeam }}>{children}</Context>;
}
