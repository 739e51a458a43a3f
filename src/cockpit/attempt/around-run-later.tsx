import { type ComponentProps, type ReactNode, useEffect, useState } from 'react';
import type { AroundRun } from './around-run.tsx';

/**
 * The run's own screen is what a tablet that starts again in the car waits for; the others are fetched beside it, once for
 * the page's life. Not React's `lazy`: that shows its fallback for a while even where the part is here, and keeps a failure.
 */
let Part: typeof AroundRun | null = null;

/** Tried again this often where it could not be had: offline before the service worker has stored everything. */
const AGAIN_MS = 2000;

export async function fetchAroundRun(): Promise<void> {
  Part = (await import('./around-run.tsx')).AroundRun;
}

/** `meanwhile` stands until the screens are here; from then on they appear at once. */
export function AroundRunLater({ meanwhile, ...props }: ComponentProps<typeof AroundRun> & { readonly meanwhile: ReactNode }) {
  const [, setHere] = useState(Part !== null);
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout> | undefined;
    let gone = false;
    const ask = (): void =>
      void fetchAroundRun().then(
        () => gone || setHere(true),
        () => {
          if (!gone) timer = setTimeout(ask, AGAIN_MS);
        },
      );
    if (Part === null) ask();
    return () => {
      gone = true;
      clearTimeout(timer);
    };
  }, []);
  return Part === null ? meanwhile : <Part {...props} />;
}
