import './finish.css';
import { formatDuration, formatSpeed, formatTimeError } from '#shared/course/format.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { HeldKey } from '#src/cockpit/run/held-key.tsx';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { sureText } from '#src/components/sure-text.ts';
import { slowWords } from './slow-words.ts';

/** Past the line: first of all slow down. The own error stands small, with its ± and the word unofficial. */
export function FinishScreen() {
  const { session, distanceUnit, speedUnit } = useRunSettings();
  const { finish } = useStructure();
  const { slowDownLimit } = session.header.pack.courseBook;
  if (finish === null) return null;
  const { magnitude, word } = formatTimeError(finish.timeError, 2);
  return (
    <main className="finish">
      <LiveText className="finish-slow" of={(r) => slowWords(r.finish?.stopBoardIn ?? null, distanceUnit)} />
      <p className="finish-now">
        <LiveText className="finish-speed" of={(r) => (r.speed === null ? '–' : `${formatSpeed(r.speed, speedUnit)} ${speedUnit}`)} />
        {slowDownLimit === null ? null : (
          <span>
            limit {slowDownLimit.text} {slowDownLimit.unit}
          </span>
        )}
      </p>
      <dl className="finish-own">
        <dt>own time, unofficial</dt>
        <dd>{formatDuration(finish.elapsed, 2)}</dd>
        <dd>
          {magnitude} {word} {sureText(finish.sigma)}
        </dd>
      </dl>
      <HeldKey
        className="finish-end"
        disabled={session.role === 'reader'}
        act={() => session.act({ type: 'run-ended.v1', outcome: 'finished' })}
      >
        end the run
      </HeldKey>
    </main>
  );
}
