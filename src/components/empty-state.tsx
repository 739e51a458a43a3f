import type { ReactNode } from 'react';
import { EvenLine } from './even-line.tsx';

/** An empty place says what will stand there and offers the one act that fills it. */
export function EmptyState({ children, act }: { readonly children: ReactNode; readonly act?: ReactNode }) {
  return (
    <div className="grid max-w-prose gap-4 py-8">
      <EvenLine className="text-quiet" />
      <p className="text-lg">{children}</p>
      {act === undefined ? null : <div>{act}</div>}
    </div>
  );
}
