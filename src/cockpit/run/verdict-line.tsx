import { useStructure } from '#src/cockpit/live/use-live.ts';
import { shortName } from '#src/cockpit/view/names.ts';
import { verdictWords } from '#src/cockpit/view/words.ts';
import { Icon } from '#src/components/icon.tsx';
import { useRunSettings } from './run-context.ts';

/** What became of the last touch, with the one act that answers it, beside the thumb that made it. */
export function VerdictLine() {
  const { session } = useRunSettings();
  const { lastTap, warnings } = useStructure();
  const readOnly = session.role === 'reader';
  const missed = warnings.find((warning) => warning.code === 'checkpoint-missed');
  if (missed !== undefined) {
    const name = session.header.pack.courseBook.checkpoints
      .concat(session.header.pack.ownCheckpoints)
      .find((c) => c.id === missed.checkpoint)?.name;
    return (
      <div className="verdict">
        <span className="verdict-words">{shortName(name ?? 'place')} passed untouched</span>
        <button
          type="button"
          className="key"
          disabled={readOnly}
          onPointerDown={(event) => session.act({ type: 'tap.v1', input: 'glass', checkpoint: missed.checkpoint }, event.timeStamp)}
        >
          late touch
        </button>
      </div>
    );
  }
  if (lastTap === null) return <div className="verdict" />;
  const doubted = lastTap.verdict === 'doubted';
  const undone = lastTap.verdict === 'voided';
  return (
    <div className="verdict" role="status">
      <span className="verdict-words">{verdictWords(lastTap)}</span>
      {doubted ? (
        <button
          type="button"
          className="key"
          disabled={readOnly}
          onClick={() => session.act({ type: 'tap-accepted.v1', tap: lastTap.seq })}
        >
          use it
        </button>
      ) : null}
      {doubted || undone ? null : (
        <button type="button" className="key" disabled={readOnly} onClick={() => session.act({ type: 'tap-voided.v1', tap: lastTap.seq })}>
          <Icon name="undo" />
          undo
        </button>
      )}
    </div>
  );
}
