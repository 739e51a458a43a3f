import type { UseQueryResult } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { EmptyState } from '#src/components/empty-state.tsx';
import { FailureNotice } from './failure-notice.tsx';
import { useNow } from './use-now.ts';
import { useOnline } from './use-online.ts';
import { relativeAge } from './when.ts';

/** Shows what a query has. Old data stays on the page with its age; an error never wipes it out. */
export function Loaded<T>({ query, children }: { readonly query: UseQueryResult<T>; readonly children: (data: T) => ReactNode }) {
  const online = useOnline();
  if (query.data !== undefined) {
    return (
      <>
        {query.isError || !online ? <Age atMs={query.dataUpdatedAt} /> : null}
        {children(query.data)}
      </>
    );
  }
  if (query.isError) return <FailureNotice error={query.error} retry={() => void query.refetch()} />;
  if (!online)
    return (
      <EmptyState>This page was never opened on this device, and there is no connection. It fills when the connection is back.</EmptyState>
    );
  return (
    <p role="status" className="text-quiet py-8">
      loading
    </p>
  );
}

function Age({ atMs }: { readonly atMs: number }) {
  const now = useNow();
  return (
    <p role="status" className="border-quiet text-quiet mb-4 border-l-4 pl-3">
      As of {relativeAge(atMs, now)}; the server cannot be reached now.
    </p>
  );
}
