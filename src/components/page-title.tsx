import type { ReactNode } from 'react';
import { EvenLine } from './even-line.tsx';

/** Title of a page over the even line; what can be done on the page stands at its right end. */
export function PageTitle({ children, acts }: { readonly children: ReactNode; readonly acts?: ReactNode }) {
  return (
    <header className="mb-6">
      <div className="flex flex-wrap items-end justify-between gap-4">
        <h1 className="text-3xl font-bold">{children}</h1>
        {acts === undefined ? null : <div className="flex flex-wrap gap-2">{acts}</div>}
      </div>
      <EvenLine className="mt-1" />
    </header>
  );
}
