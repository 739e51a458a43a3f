import './start.css';
import { useRef, useState } from 'react';
import { formatClock, formatDuration, formatSpeed } from '#shared/course/format.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { tick } from '#src/cockpit/devices/tick.ts';
import { ReleaseEntry } from '#src/cockpit/grid/release-entry.tsx';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { usePainter } from '#src/cockpit/live/use-live.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { Icon } from '#src/components/icon.tsx';
import { countdownText, tickAt } from './countdown-figure.ts';
import { FlagKey } from './flag-key.tsx';

/** The last minute: seconds and nothing else, with a tick from ten on. The starter outranks it. */
export function Countdown() {
  const { session, timeZone, speedUnit } = useRunSettings();
  const [muted, setMuted] = useState(false);
  const [typing, setTyping] = useState(false);
  const ticked = useRef<number | null>(null);
  usePainter('every frame', (readout) => {
    const due = readout.toRelease === null ? null : tickAt(readout.toRelease);
    if (due !== null && due !== ticked.current && !muted) tick(due === 0);
    ticked.current = due;
  });
  if (typing) return <ReleaseEntry done={() => setTyping(false)} />;
  return (
    <main className="start">
      <p className="start-top">
        <span>
          release <LiveText of={(r) => (r.release === null ? '' : formatClock(r.release, timeZone))} />
        </span>
        <LiveText of={(r) => (r.official === null ? 'clock unchecked' : `official ${formatClock(r.official.now, timeZone)}`)} />
      </p>
      <LiveText className="start-figure" pace="every frame" of={(r) => (r.toRelease === null ? '' : countdownText(r.toRelease))} />
      <p className="start-words">
        <strong>the starter outranks this screen</strong>
        <LiveText className="quiet" of={(r) => firstSpeed(r, (mps) => `${formatSpeed(mps, speedUnit)} ${speedUnit}`)} />
      </p>
      <div className="start-keys">
        <button type="button" className="key" disabled={session.role === 'reader'} onClick={() => setTyping(true)}>
          new release
        </button>
        <FlagKey />
        <button type="button" className="key" aria-pressed={muted} onClick={() => setMuted(!muted)}>
          <Icon name={muted ? 'silent' : 'sound'} />
          {muted ? 'silent' : 'sound'}
        </button>
      </div>
    </main>
  );
}

const firstSpeed = (readout: Readout, words: (mps: number) => string): string =>
  readout.hold.kind === 'none' ? '' : `then hold ${words(readout.hold.speed)}`;

/** Released, and the car does not roll: time runs on and is kept; a new release may be typed in. */
export function Held() {
  const { session, timeZone } = useRunSettings();
  const [typing, setTyping] = useState(false);
  if (typing) return <ReleaseEntry done={() => setTyping(false)} />;
  return (
    <main className="start">
      <p className="start-top">
        <span>
          release <LiveText of={(r) => (r.release === null ? '' : formatClock(r.release, timeZone))} />
        </span>
        <span>time is kept</span>
      </p>
      <LiveText className="start-figure" of={(r) => (r.toRelease === null ? '' : formatDuration(Math.floor(-r.toRelease)))} />
      <p className="start-words">
        <strong>held?</strong>
        <span className="quiet">the run begins by itself when the car rolls</span>
      </p>
      <div className="start-keys">
        <button type="button" className="key" disabled={session.role === 'reader'} onClick={() => setTyping(true)}>
          new release
        </button>
        <FlagKey />
      </div>
    </main>
  );
}
