import { useEffect, useMemo } from 'react';
import type { Phase } from '#shared/pace/readout.ts';
import { wakeSound } from '#src/cockpit/devices/tick.ts';
import { useWakeLock } from '#src/cockpit/devices/use-wake-lock.ts';
import { createLiveModel } from '#src/cockpit/live/live-model.ts';
import { LiveContext, useLiveLoop, useStructure } from '#src/cockpit/live/use-live.ts';
import { RunContext } from '#src/cockpit/run/run-context.ts';
import { RunScreen } from '#src/cockpit/run/run-screen.tsx';
import { holdUpdates } from '#src/components/app-update.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { AroundRunLater } from './around-run-later.tsx';
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

function Phases(props: SessionProps) {
  const { session, store } = props;
  const { phase } = useStructure();
  useOutbox(session, store, phase);
  const run = <RunScreen side={session.header.pack.settings.buttonSide} />;
  const screen =
    phase === 'running' ? run : <AroundRunLater phase={phase} {...props} meanwhile={NO_RUN.has(phase) ? <main className="run" /> : run} />;
  return (
    <>
      {phase === 'ended' ? null : <OpenRun />}
      {screen}
    </>
  );
}

/** Where the run's screen would say nothing that is so; everywhere else it is better than none. */
const NO_RUN: ReadonlySet<Phase> = new Set(['grid', 'ended']);

/** While the run is open the screen stays on and no newer version comes in. */
function OpenRun() {
  useWakeLock();
  useEffect(holdUpdates, []);
  // After a reload the countdown is silent until a touch anywhere lets it sound.
  useEffect(() => {
    addEventListener('pointerdown', wakeSound);
    return () => removeEventListener('pointerdown', wakeSound);
  }, []);
  return null;
}
