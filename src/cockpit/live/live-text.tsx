import { useRef } from 'react';
import type { Readout } from '#shared/pace/readout.ts';
import { usePainter } from './use-live.ts';

/** A text node that follows the readout; written only when its words change. */
export function LiveText({ of, className }: { readonly of: (readout: Readout) => string; readonly className?: string }) {
  const element = useRef<HTMLSpanElement>(null);
  const shown = useRef<string | null>(null);
  usePainter((readout) => {
    const words = of(readout);
    if (words === shown.current || element.current === null) return;
    shown.current = words;
    element.current.textContent = words;
  });
  return <span ref={element} className={className} />;
}
