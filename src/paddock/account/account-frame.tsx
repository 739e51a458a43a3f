import type { ReactNode } from 'react';
import { Link } from 'react-router';
import { PageTitle } from '#src/components/page-title.tsx';
import { UpdatePrompt } from '#src/components/update-prompt.tsx';

/** The frame of the pages before sign-in. What is on this device stays in reach without any account. */
export function AccountFrame({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <div className="mx-auto grid max-w-xl gap-6 px-4 py-8">
      <UpdatePrompt />
      <main>
        <p className="font-figure text-quiet mb-6">evenline</p>
        <PageTitle>{title}</PageTitle>
        {children}
      </main>
      <footer className="text-quiet border-hair border-t pt-4">
        Runs and packs on this device need no sign-in:{' '}
        <Link className="text-ink underline underline-offset-4" to="/device">
          on this device
        </Link>
        .
      </footer>
    </div>
  );
}
