import { useEffect, useState } from 'react';
import { Shell } from '#src/cockpit/shell.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import type { OpenRunOptions } from '#src/run/open-run.ts';
import { openRunSession } from '#src/run/run-session.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore, StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { fetchAroundRun } from './around-run-later.tsx';
import { ChooseRun, type RunChoice } from './choose-run.tsx';
import { deviceId } from './device-id.ts';
import { exchangeTime } from './exchange-time.ts';
import { attachAgain, attachSource } from './sensor-choice.ts';
import { SessionScreen } from './session-screen.tsx';

type State =
  | { readonly at: 'reading' }
  | { readonly at: 'no pack' }
  | { readonly at: 'choice'; readonly stored: StoredPack; readonly runs: readonly StoredRunSummary[]; readonly trouble: string | null }
  | { readonly at: 'run'; readonly stored: StoredPack; readonly session: RunSession };

interface AttemptProps {
  readonly store: JournalStore;
  readonly attemptId: string;
}

/** One attempt: back into its open run at once, wherever the page was killed; else the choice of a run. */
export function AttemptPage({ store, attemptId }: AttemptProps) {
  const [state, setState] = useState<State>({ at: 'reading' });
  useEffect(() => {
    let session: RunSession | null = null;
    let gone = false;
    // Behind the choice of a run comes the grid, at once. Where this fails, the screen that needs it asks again.
    fetchAroundRun().catch(() => undefined);
    void resume(store, attemptId).then((next) => {
      if (next.at === 'run') session = next.session;
      if (gone) void session?.close();
      else setState(next);
    });
    return () => {
      gone = true;
      void session?.close();
    };
  }, [store, attemptId]);

  if (state.at === 'reading') return <Shell title="Cockpit">opening</Shell>;
  if (state.at === 'no pack') return <NoPack />;
  if (state.at === 'run') {
    const again = (): void => void state.session.close().then(async () => setState(await choiceFor(store, state.stored, null)));
    return <SessionScreen session={state.session} store={store} again={again} />;
  }
  const { stored } = state;
  const choose = (choice: RunChoice): void => void begin(store, stored, choice).then(setState);
  return <ChooseRun {...state} store={store} choose={choose} />;
}

function NoPack() {
  return (
    <Shell title="Cockpit">
      <EmptyState
        act={
          <a className="key key-main" href="/">
            to the paddock
          </a>
        }
      >
        The pack of this attempt is not on this tablet. Store it in the paddock while there is a connection; from then on none is needed.
      </EmptyState>
    </Shell>
  );
}

async function resume(store: JournalStore, attemptId: string): Promise<State> {
  const stored = await store.getPackForAttempt(attemptId);
  if (stored === null) return { at: 'no pack' };
  const runs = (await store.listRuns()).filter((run) => run.header.attemptId === attemptId);
  const open = runs.findLast((run) => !run.ended);
  if (open === undefined) return choiceFor(store, stored, null);
  const opened = await openRunSession(
    optionsFor(store, { ...stored, pack: open.header.pack, digest: open.header.packDigest }, { which: { runId: open.runId } }),
  );
  if (!opened.ok) return choiceFor(store, stored, opened.error.message);
  void attachAgain(opened.value);
  return { at: 'run', stored, session: opened.value };
}

async function choiceFor(store: JournalStore, stored: StoredPack, trouble: string | null): Promise<State> {
  const runs = (await store.listRuns()).filter((run) => run.header.attemptId === stored.attemptId && run.ended);
  return { at: 'choice', stored, runs, trouble };
}

async function begin(store: JournalStore, stored: StoredPack, choice: RunChoice): Promise<State> {
  const opened = await openRunSession(optionsFor(store, stored, { which: 'new', ...choice }));
  if (!opened.ok) return choiceFor(store, stored, opened.error.message);
  if (choice.practice) void attachSource(opened.value, 'simulator', true);
  else void attachAgain(opened.value);
  return { at: 'run', stored, session: opened.value };
}

function optionsFor(
  store: JournalStore,
  stored: StoredPack,
  rest: Pick<OpenRunOptions, 'which' | 'practice' | 'clockRate'>,
): OpenRunOptions {
  return {
    store,
    pack: stored.pack,
    packDigest: stored.digest,
    deviceId: deviceId(),
    appVersion: import.meta.env.VITE_APP_VERSION,
    exchangeTime,
    ...rest,
  };
}
