import { createRoot } from 'react-dom/client';
import { openJournalStore } from '#src/storage/open-journal-store.ts';
import { AttemptPage } from './attempt/attempt-page.tsx';
import { placeOf } from './cockpit-path.ts';
import { missingFeatures } from './devices/support.ts';
import { PackList } from './list/pack-list.tsx';

/** Figures must not swap faces in the driver's sight: nothing is drawn before they are here (from the cache, offline). */
const FACES = ['400 20px "JetBrains Mono"', '800 20px "JetBrains Mono"'];

export async function mount(element: HTMLElement): Promise<void> {
  document.title = 'Evenline cockpit';
  await Promise.allSettled(FACES.map((face) => document.fonts.load(face)));
  const root = createRoot(element);
  const missing = missingFeatures();
  if (missing.length > 0) {
    const { Unsupported } = await import('./unsupported.tsx');
    root.render(<Unsupported missing={missing} />);
    return;
  }
  const store = await openJournalStore();
  const place = placeOf(location.pathname);
  root.render(place.page === 'list' ? <PackList store={store} /> : <AttemptPage store={store} attemptId={place.attemptId} />);
}
