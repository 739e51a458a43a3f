import { useEffect, useRef } from 'react';
import type { Checkpoint } from '#shared/course/course-book.ts';
import { usePainter, useStructure } from '#src/cockpit/live/use-live.ts';
import { fittingSize, shortName } from '#src/cockpit/view/names.ts';
import { useRunSettings } from './run-context.ts';

const SIZES = [46, 38, 30, 25] as const;
/** Width for the name at 1280x800, design pixels. */
const NAME_WIDTH = 372;
/** How long the touch stays on the button; the verdict line has taken over by then. */
const TOUCH_SHOWN_MS = 900;

/**
 * The one button. The touch is taken on pointer-down with the event's own instant and shown in the same handler, past
 * React, so that neither a busy frame nor a commit stands between the finger and the journal. On the grid it is tried.
 */
export function CheckpointButton({ trial }: { readonly trial?: { readonly name: string; readonly words: string } }) {
  const { session } = useRunSettings();
  const { next, warnings } = useStructure();
  const button = useRef<HTMLButtonElement>(null);
  const full = useRef<HTMLSpanElement>(null);
  const checkpoint = trial === undefined ? (next?.checkpoint ?? null) : null;
  useTouch(button, (timeStamp) => session.act({ type: 'tap.v1', input: 'glass', checkpoint: checkpoint?.id ?? null }, timeStamp).ok);

  usePainter('every frame', (readout) => {
    const nearness = readout.next === null || trial !== undefined ? 0 : readout.next.inReach ? 1 : readout.next.nearness;
    const clip = `inset(${((1 - nearness) * 100).toFixed(1)}% 0 0 0)`;
    if (full.current !== null && full.current.style.clipPath !== clip) full.current.style.clipPath = clip;
  });

  if (session.role === 'reader') {
    return (
      <button type="button" className="tap" disabled>
        <span className="tap-face">reading from the other window</span>
      </button>
    );
  }
  const name = trial?.name ?? (checkpoint === null ? 'touch' : shortName(checkpoint.name));
  const size = fittingSize(name, NAME_WIDTH, 2, SIZES);
  const missed = warnings.some((warning) => warning.code === 'checkpoint-missed' && warning.checkpoint === checkpoint?.id);
  const words = trial?.words ?? touchWords(checkpoint, missed);
  const face = (
    <>
      <span className="tap-name" data-size={size}>
        {name}
      </span>
      <span>{words}</span>
    </>
  );
  return (
    <button type="button" className="tap" ref={button} aria-label={`touch ${name}`}>
      <span className="tap-face">{face}</span>
      <span ref={full} className="tap-face tap-full" aria-hidden="true">
        {face}
      </span>
      <span className="tap-face tap-touched" aria-hidden="true">
        touched
      </span>
    </button>
  );
}

function touchWords(checkpoint: Checkpoint | null, missed: boolean): string {
  if (missed) return 'passed, a late touch counts';
  return checkpoint?.duty === 'finish' || checkpoint?.duty === 'stop board' ? 'passes by itself' : 'touch as you pass';
}

/** Pointer-down on the glass, or Enter and space for whoever has keys; `touched` says whether the act was journalled. */
function useTouch(button: React.RefObject<HTMLButtonElement | null>, touched: (timeStamp: number) => boolean): void {
  const newest = useRef(touched);
  useEffect(() => {
    newest.current = touched;
  });
  useEffect(() => {
    const element = button.current;
    if (element === null) return;
    let timer: ReturnType<typeof setTimeout> | undefined;
    const take = (event: Event): void => {
      if (!newest.current(event.timeStamp)) return;
      element.setAttribute('data-touched', 'true');
      clearTimeout(timer);
      timer = setTimeout(() => element.removeAttribute('data-touched'), TOUCH_SHOWN_MS);
    };
    const onKey = (event: KeyboardEvent): void => {
      if ((event.key === 'Enter' || event.key === ' ') && !event.repeat) take(event);
    };
    element.addEventListener('pointerdown', take);
    element.addEventListener('keydown', onKey);
    return () => {
      clearTimeout(timer);
      element.removeEventListener('pointerdown', take);
      element.removeEventListener('keydown', onKey);
    };
  }, [button]);
}
