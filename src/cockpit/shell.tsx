import './shell.css';
import './keys.css';
import type { ReactNode } from 'react';
import { ThemeKey } from './theme-key.tsx';

/** Frame of the cockpit's pages around a run. */
export function Shell({ title, children }: { readonly title: string; readonly children: ReactNode }) {
  return (
    <main className="shell">
      <header className="shell-head">
        <h1>{title}</h1>
        <ThemeKey />
      </header>
      {children}
    </main>
  );
}
