import { useEffect, useMemo } from 'react';
import { wakeSound } from '#src/cockpit/devices/tick.ts';
import { useWakeLock } from '#src/cockpit/devices/use-wake-lock.ts';
import { EndedScreen } from '#src/cockpit/finish/ended-screen.tsx';
import { FinishScreen } from '#src/cockpit/finish/finish-screen.tsx';
import { GridCheck } from '#src/cockpit/grid/grid-check.tsx';
import { createLiveModel, heldForLong } from '#src/cockpit/live/live-model.ts';
import { LiveContext, useLiveLoop, useStructure } from '#src/cockpit/live/use-live.ts';
import { RunContext, useRunSettings } from '#src/cockpit/run/run-context.ts';
import { RunScreen } from '#src/cockpit/run/run-screen.tsx';
import { Countdown, Held } from '#src/cockpit/start/countdown.tsx';
import { StoppedScreen } from '#src/cockpit/stop/stopped-screen.tsx';
import { holdUpdates } from '#src/components/app-update.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { useOutbox } from './use-outbox.ts';

interface SessionProps {
  readonly session: RunSession;
  readonly store: JournalStore;
  /** Leaves the ended run for the choice of another. */
  readonly again: () => void;
}

/** A run that is open on this tablet, whatever its phase. */
export function SessionScreen(props: SessionProps) {
  const { session } = props;
  const model = useMemo(() => createLiveModel(session), [session]);
  useLiveLoop(model);
  const settings = useMemo(() => {
    const { pack } = session.header;
    return { session, speedUnit: pack.settings.speedUnit, distanceUnit: pack.courseBook.unit, timeZone: pack.event.timeZone };
  }, [session]);
  return (
    <RunContext value={settings}>
      <LiveContext value={model}>
        <Phases {...props} />
      </LiveContext>
    </RunContext>
  );
}

function Phases({ session, store, again }: SessionProps) {
  const { phase } = useStructure();
  useOutbox(session, store, phase);
  if (phase === 'ended') return <EndedScreen session={session} store={store} again={again} />;
  return <OpenRun />;
}

/** While the run is open the screen stays on and no newer version comes in. */
function OpenRun() {
  const { session } = useRunSettings();
  const structure = useStructure();
  useWakeLock();
  useEffect(holdUpdates, []);
  // After a reload the countdown is silent until a touch anywhere lets it sound.
  useEffect(() => {
    addEventListener('pointerdown', wakeSound);
    return () => removeEventListener('pointerdown', wakeSound);
  }, []);
  const { buttonSide } = session.header.pack.settings;
  switch (structure.phase) {
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
    case 'running':
    case 'ended':
      return <RunScreen side={buttonSide} />;
  }
}
