import '#src/cockpit/entry/entry.css';
import './touch-clock.css';
import { type SyntheticEvent, useRef, useState } from 'react';
import { formatClock } from '#shared/course/format.ts';
import { LEAST_TOUCHES, OWN_TOUCHES, type OwnRhythm, ownRhythm, type TapSet, tapSetOf } from '#shared/pace/clock-taps.ts';
import { usePainter } from '#src/cockpit/live/use-live.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';

/** How long the flash of each second stands, microseconds. */
const FLASH_US = 120_000;
/** A pause this long begins a new row of touches. */
const PAUSE_US = 3_500_000;

/** An official clock that can only be seen: touched in its rhythm on ten seconds or more, its reading confirmed by the person. */
export function TouchClock({ done }: { readonly done: () => void }) {
  const { session, timeZone } = useRunSettings();
  const [alongOwn, setAlongOwn] = useState(false);
  const [own, setOwn] = useState<OwnRhythm | null>(null);
  const [touches, setTouches] = useState<readonly number[]>([]);
  const [later, setLater] = useState(0);
  const set = alongOwn ? null : tapSetOf(touches, own ?? undefined);
  const second = set === null ? null : secondShown(set, session) + later * 1000;

  const touch = (event: SyntheticEvent): void => {
    const at = session.clock.at(event.timeStamp);
    const last = touches[touches.length - 1];
    const row = last === undefined || at - last > PAUSE_US ? [at] : [...touches, at];
    setTouches(row);
    setLater(0);
    if (!alongOwn || row.length < OWN_TOUCHES) return;
    setOwn(ownRhythm(row, 0));
    setAlongOwn(false);
    setTouches([]);
  };
  const journal = (): void => {
    if (set === null || second === null) return;
    const officialMs = second + (session.clock.now() - set.at) / 1000;
    session.act({ type: 'clock.v1', source: 'tap', officialMs, uncertaintyMs: set.sigmaMs });
    done();
  };
  return (
    <main className="entry">
      <section className="entry-fields" aria-label="clock by touch">
        <h1 className="entry-title">{alongOwn ? 'touch along our own flash' : 'touch along the official clock'}</h1>
        <p className="entry-words" role="status">
          {set === null || second === null
            ? countWords(touches.length, alongOwn ? OWN_TOUCHES : LEAST_TOUCHES, own)
            : `it read ${formatClock(second, timeZone)} at the last touch? ±${Math.ceil(2 * set.sigmaMs)} ms`}
        </p>
        <div className="entry-second">
          {second === null ? (
            <button type="button" className="key" onClick={() => startOver(!alongOwn)}>
              {alongOwn ? 'official clock' : 'our own flash first'}
            </button>
          ) : (
            [-1, 1].map((by) => (
              <button key={by} type="button" className="key" onClick={() => setLater(later + by)}>
                {by < 0 ? '1 s earlier' : '1 s later'}
              </button>
            ))
          )}
        </div>
      </section>
      <button
        type="button"
        className="key entry-touch"
        onPointerDown={touch}
        onKeyDown={(e) => (e.key === ' ' && !e.repeat ? touch(e) : null)}
      >
        {alongOwn ? <Flash /> : null}
        each second
      </button>
      <button type="button" className="key entry-back" onClick={done}>
        back
      </button>
      <button type="button" className="key entry-set" disabled={second === null} onClick={journal}>
        set
      </button>
    </main>
  );

  function startOver(flash: boolean): void {
    setAlongOwn(flash);
    setTouches([]);
  }
}

/** What the clock in force says of the last touched second, to the nearest whole one; the person corrects it. */
function secondShown(set: TapSet, session: ReturnType<typeof useRunSettings>['session']): number {
  const now = session.readout().official?.now ?? session.header.createdMs;
  return Math.round((now + (set.at - session.clock.now()) / 1000) / 1000) * 1000;
}

function countWords(n: number, of: number, own: OwnRhythm | null): string {
  if (n > 0) return `${n} of ${of}`;
  if (own === null) return `${of} seconds running`;
  return `you touch ${Math.abs(Math.round(own.lateMs))} ms ${own.lateMs < 0 ? 'early' : 'late'}: taken off`;
}

/** On at every whole second of the session clock. */
function Flash() {
  const { session } = useRunSettings();
  const element = useRef<HTMLSpanElement>(null);
  usePainter('every frame', () => {
    const on = session.clock.now() % 1_000_000 < FLASH_US ? '1' : '0';
    if (element.current !== null && element.current.style.opacity !== on) element.current.style.opacity = on;
  });
  return <span ref={element} className="entry-flash" aria-hidden="true" />;
}
