import type { ReactNode } from 'react';
import { useHeldTouch } from './use-held-touch.ts';

/** A key that acts after a second of steady touch; the ring closes as the second passes. */
export function HeldKey({
  children,
  act,
  disabled = false,
  className = '',
}: {
  readonly children: ReactNode;
  readonly act: () => void;
  readonly disabled?: boolean;
  readonly className?: string;
}) {
  const { holding, handlers } = useHeldTouch(act);
  return (
    <button
      type="button"
      className={`key ${className}`}
      disabled={disabled}
      data-holding={holding}
      aria-description="hold for one second"
      {...handlers}
    >
      <svg className="hold-ring" viewBox="0 0 40 40" aria-hidden="true">
        <circle className="hold-ring-rest" cx="20" cy="20" r="15.9155" />
        <circle className="hold-ring-done" cx="20" cy="20" r="15.9155" />
      </svg>
      {children}
    </button>
  );
}
