import { useEffect } from 'react';
import type { Phase } from '#shared/pace/readout.ts';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { startOutboxLater } from './outbox-later.ts';

const ON_COURSE: ReadonlySet<Phase> = new Set(['countdown', 'held', 'running', 'stopped']);

/** Journals go to the server from here too; from the countdown to the line only where the class permits a data link. */
export function useOutbox(session: RunSession, store: JournalStore, phase: Phase): void {
  const mayLink = session.header.pack.raceClass.aids.dataLink || !ON_COURSE.has(phase);
  useEffect(() => (mayLink ? startOutboxLater(store) : undefined), [mayLink, store]);
}
