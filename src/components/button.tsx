import type { ButtonHTMLAttributes } from 'react';

export type ButtonKind = 'main' | 'plain' | 'bare';

const KINDS: Readonly<Record<ButtonKind, string>> = {
  main: 'bg-ink text-ground border-ink',
  plain: 'bg-transparent text-ink border-ink',
  bare: 'bg-transparent text-ink border-transparent underline underline-offset-4',
};

export interface ButtonProps extends ButtonHTMLAttributes<HTMLButtonElement> {
  /** `main` inverts ground and ink: one a page. `plain` has a hairline. `bare` reads as text. */
  readonly kind?: ButtonKind;
  /** Shown while the act is under way; the button cannot be pressed meanwhile. */
  readonly busy?: boolean;
}

export function Button({ kind = 'plain', busy = false, className = '', disabled, type = 'button', children, ...rest }: ButtonProps) {
  return (
    <button
      type={type}
      disabled={disabled === true || busy}
      aria-busy={busy}
      className={`rounded-paddock inline-flex min-h-11 items-center justify-center gap-2 border px-4 py-2 text-base font-bold disabled:border-hair disabled:bg-pool disabled:text-quiet ${KINDS[kind]} ${className}`}
      {...rest}
    >
      {children}
    </button>
  );
}
