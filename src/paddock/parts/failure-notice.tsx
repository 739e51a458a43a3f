import { ApiError } from '#src/api/api-error.ts';
import { Button } from '#src/components/button.tsx';
import { FaultNotice } from '#src/components/notice.tsx';

/** A failed request in words, with what the server found at which place, and the request's number for the log. */
export function FailureNotice({ error, retry }: { readonly error: unknown; readonly retry?: () => void }) {
  const message = error instanceof Error ? error.message : 'Something went wrong here. Reload the page.';
  const requestId = error instanceof ApiError ? error.requestId : null;
  return (
    <FaultNotice act={retry === undefined ? undefined : <Button onClick={retry}>try again</Button>}>
      {message}
      {error instanceof ApiError && error.faults.length > 0 ? (
        <ul className="list-disc pl-5">
          {error.faults.map((fault) => (
            <li key={`${fault.code} ${fault.where}`}>
              {fault.where}: {fault.message}
            </li>
          ))}
        </ul>
      ) : null}
      {requestId === null ? null : <span className="text-quiet block text-sm">request {requestId}</span>}
    </FaultNotice>
  );
}
