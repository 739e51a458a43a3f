import type { Phase } from '#shared/pace/readout.ts';
import { EndedScreen } from '#src/cockpit/finish/ended-screen.tsx';
import { FinishScreen } from '#src/cockpit/finish/finish-screen.tsx';
import { GridCheck } from '#src/cockpit/grid/grid-check.tsx';
import { heldForLong } from '#src/cockpit/live/live-model.ts';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { Countdown, Held } from '#src/cockpit/start/countdown.tsx';
import { StoppedScreen } from '#src/cockpit/stop/stopped-screen.tsx';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';

interface AroundProps {
  readonly phase: Exclude<Phase, 'running'>;
  readonly session: RunSession;
  readonly store: JournalStore;
  readonly again: () => void;
}

/** Every screen of an open attempt but the run's own. */
export function AroundRun({ phase, session, store, again }: AroundProps) {
  const structure = useStructure();
  const { buttonSide } = session.header.pack.settings;
  switch (phase) {
    case 'grid':
      return <GridCheck side={buttonSide} />;
    case 'countdown':
      return <Countdown />;
    case 'held':
      return heldForLong(structure) ? <GridCheck side={buttonSide} /> : <Held />;
    case 'stopped':
      return <StoppedScreen />;
    case 'finished':
      return <FinishScreen />;
    case 'ended':
      return <EndedScreen session={session} store={store} again={again} />;
  }
}
