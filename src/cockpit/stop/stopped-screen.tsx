import './stop.css';
import { formatClock, formatDuration } from '#shared/course/format.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { HeldKey } from '#src/cockpit/run/held-key.tsx';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { postsAround, radioWords } from './posts.ts';

/** Red flag: no band, no advice. Where the car is, in words for the radio, and how the run may go on. */
export function StoppedScreen() {
  const { session, distanceUnit, timeZone } = useRunSettings();
  const { pack } = session.header;
  const places = session.course().places;
  const readOnly = session.role === 'reader';
  return (
    <main className="stop">
      <header className="stop-head">
        <span className="stop-car">{pack.entry.number}</span>
        <span className="stop-word">stopped</span>
        <LiveText className="stop-clock" of={(r) => (r.official === null ? '' : formatClock(r.official.now, timeZone))} />
      </header>
      <LiveText
        className="stop-radio"
        of={(r) => radioWords(pack.entry.number, postsAround(places, r.distance), r.distance, distanceUnit)}
      />
      <p className="quiet stop-time">
        time goes on and is kept: <LiveText of={(r) => (r.elapsed === null ? '–' : formatDuration(Math.floor(r.elapsed)))} />
      </p>
      <div className="stop-keys">
        <HeldKey disabled={readOnly} act={() => session.act({ type: 'run-resumed.v1', as: 'racing' })}>
          racing again
        </HeldKey>
        <HeldKey disabled={readOnly} act={() => session.act({ type: 'run-resumed.v1', as: 'escort' })}>
          behind escort
        </HeldKey>
        <HeldKey disabled={readOnly} act={() => session.act({ type: 'run-ended.v1', outcome: 'rerun' })}>
          rerun
        </HeldKey>
        <HeldKey disabled={readOnly} act={() => session.act({ type: 'run-ended.v1', outcome: 'void' })}>
          void
        </HeldKey>
      </div>
    </main>
  );
}
