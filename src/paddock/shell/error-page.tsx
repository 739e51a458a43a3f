import { isRouteErrorResponse, Link, useRouteError } from 'react-router';
import { Button } from '#src/components/button.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { PageTitle } from '#src/components/page-title.tsx';

/** A bug, or an address that leads nowhere. Journals are not in reach of either. */
export function ErrorPage() {
  const error = useRouteError();
  if (isRouteErrorResponse(error) && error.status === 404) return <NotFoundPage />;
  console.error(error);
  return (
    <main className="mx-auto max-w-xl px-4 py-8">
      <PageTitle>This page broke</PageTitle>
      <FaultNotice act={<Button onClick={() => location.reload()}>reload</Button>}>
        {error instanceof Error ? error.message : 'Something went wrong here.'} Runs and packs on this device are untouched.
      </FaultNotice>
    </main>
  );
}

export function NotFoundPage() {
  return (
    <main className="mx-auto max-w-xl px-4 py-8">
      <PageTitle>Nothing here</PageTitle>
      <p>
        No page stands at this address.{' '}
        <Link className="underline underline-offset-4" to="/event">
          To the event
        </Link>
      </p>
    </main>
  );
}
