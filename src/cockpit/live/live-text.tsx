import { useRef } from 'react';
import type { Readout } from '#shared/pace/readout.ts';
import type { Pace } from './live-model.ts';
import { usePainter } from './use-live.ts';

interface LiveTextProps {
  readonly of: (readout: Readout) => string;
  readonly className?: string;
  readonly pace?: Pace;
}

/** A text node that follows the readout; written only when its words change. */
export function LiveText({ of, className, pace = 'figures' }: LiveTextProps) {
  const element = useRef<HTMLSpanElement>(null);
  const shown = useRef<string | null>(null);
  usePainter(pace, (readout) => {
    const words = of(readout);
    if (words === shown.current || element.current === null) return;
    shown.current = words;
    element.current.textContent = words;
  });
  return <span ref={element} className={className} />;
}
