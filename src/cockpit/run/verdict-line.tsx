import { useState } from 'react';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { FlagKey } from '#src/cockpit/start/flag-key.tsx';
import { shortName } from '#src/cockpit/view/names.ts';
import { isEscorted, verdictWords } from '#src/cockpit/view/words.ts';
import { Icon } from '#src/components/icon.tsx';
import { useRunSettings } from './run-context.ts';

/** What became of the last touch, with the one act that answers it, beside the thumb that made it. */
export function VerdictLine() {
  const { session } = useRunSettings();
  const { lastTap, next, warnings, phase, timeError, elapsed, band } = useStructure();
  // Touches made before this screen came (the button tried on the grid) are no news here.
  const [seen] = useState(lastTap?.verdict === 'no place near' ? lastTap.seq : null);
  const { act } = session;
  if (phase === 'running' && elapsed === null && session.header.pack.event.rules.timeStart !== 'scheduled') {
    return (
      <div className="verdict">
        <FlagKey />
      </div>
    );
  }
  if (isEscorted({ phase, timeError, band })) {
    return <Line words="behind escort, no advice" label="racing again" act={() => act({ type: 'run-resumed.v1', as: 'racing' })} />;
  }
  if (next !== null && warnings.some((warning) => warning.code === 'checkpoint-missed')) {
    const { id, name } = next.checkpoint;
    return (
      <Line words={`${shortName(name)} passed untouched`} label="skip" act={() => act({ type: 'checkpoint-skipped.v1', checkpoint: id })} />
    );
  }
  if (lastTap === null || lastTap.seq === seen) return <div className="verdict" />;
  const { seq, verdict } = lastTap;
  const words = verdictWords(lastTap);
  switch (verdict) {
    case 'doubted':
      return <Line words={words} label="use it" act={() => act({ type: 'tap-accepted.v1', tap: seq })} />;
    case 'used':
    case 'provisional':
      return <Line words={words} label="undo" act={() => act({ type: 'tap-voided.v1', tap: seq })} />;
    case 'no place near':
    case 'repeated':
    case 'voided':
      return <Line words={words} />;
  }
}

function Line({ words, label, act }: { readonly words: string; readonly label?: string; readonly act?: () => unknown }) {
  const { session } = useRunSettings();
  return (
    <div className="verdict" role="status">
      <span className="verdict-words">{words}</span>
      {label === undefined ? null : (
        <button type="button" className="key" disabled={session.role === 'reader'} onClick={act}>
          {label === 'undo' ? <Icon name="undo" /> : null}
          {label}
        </button>
      )}
    </div>
  );
}
