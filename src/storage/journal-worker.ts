import { createJournalBackend } from './journal-backend.ts';
import { journalPlace } from './journal-place.ts';
import { announcing } from './storage-changes.ts';
import { type CallPort, serveStore } from './store-calls.ts';

/** The journal worker: the only writer of journals in this window. Listens at once, so that no call comes too early. */
serveStore(journalPlace().then(createJournalBackend).then(announcing), globalThis as unknown as CallPort);
