import { type PointerEvent, useCallback, useEffect, useRef, useState } from 'react';

/** As long as the ring takes to close in run.css. */
export const HOLD_MS = 1000;

interface HeldTouch {
  readonly holding: boolean;
  readonly handlers: {
    readonly onPointerDown: (event: PointerEvent<HTMLElement>) => void;
    readonly onPointerUp: () => void;
    readonly onPointerCancel: () => void;
    readonly onPointerLeave: () => void;
    readonly onContextMenu: (event: { preventDefault(): void }) => void;
    readonly onKeyDown: (event: { key: string; repeat: boolean }) => void;
    readonly onKeyUp: () => void;
    readonly onBlur: () => void;
  };
}

/** An act that needs a second of steady touch (or a held Enter or space), so that a bump in the road cannot make it. */
export function useHeldTouch(act: () => void): HeldTouch {
  const [holding, setHolding] = useState(false);
  const timer = useRef<ReturnType<typeof setTimeout> | null>(null);
  const release = useCallback((): void => {
    if (timer.current !== null) clearTimeout(timer.current);
    timer.current = null;
    setHolding(false);
  }, []);
  const press = (): void => {
    if (timer.current !== null) return;
    setHolding(true);
    timer.current = setTimeout(() => {
      release();
      act();
    }, HOLD_MS);
  };
  useEffect(() => release, [release]);
  return {
    holding,
    handlers: {
      onPointerDown: press,
      onPointerUp: release,
      onPointerCancel: release,
      onPointerLeave: release,
      onContextMenu: (event) => event.preventDefault(),
      onKeyDown: (event) => {
        if ((event.key === 'Enter' || event.key === ' ') && !event.repeat) press();
      },
      onKeyUp: release,
      onBlur: release,
    },
  };
}
