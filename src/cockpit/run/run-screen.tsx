import './run.css';
import './band.css';
import './tap.css';
import '#src/cockpit/keys.css';
import { useMemo } from 'react';
import { createLiveModel } from '#src/cockpit/live/live-model.ts';
import { LiveContext, useLiveLoop } from '#src/cockpit/live/use-live.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import { Band } from './band.tsx';
import { CheckpointButton } from './checkpoint-button.tsx';
import { CheckpointPanel } from './checkpoint-panel.tsx';
import { CourseStrip } from './course-strip.tsx';
import { RunContext } from './run-context.ts';

export function RunScreen({ session }: { readonly session: RunSession }) {
  const model = useMemo(() => createLiveModel(session), [session]);
  useLiveLoop(model);
  const { pack } = session.header;
  const settings = useMemo(
    () => ({ session, speedUnit: pack.settings.speedUnit, distanceUnit: pack.courseBook.unit, timeZone: pack.event.timeZone }),
    [session, pack],
  );
  return (
    <RunContext value={settings}>
      <LiveContext value={model}>
        <main className="run" data-side={pack.settings.buttonSide}>
          <Band />
          <CheckpointPanel />
          <CourseStrip />
          <CheckpointButton />
        </main>
      </LiveContext>
    </RunContext>
  );
}
