import { useSyncExternalStore } from 'react';
import { useWakeLock } from '#src/cockpit/devices/use-wake-lock.ts';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { ThemeKey } from '#src/cockpit/theme-key.tsx';
import { ClockItem } from './clock-item.tsx';
import { buttonItem, storageItem, wakeItem } from './grid-item.ts';
import { ItemRow } from './item-row.tsx';
import { SensorItem } from './sensor-item.tsx';
import { usePersistence } from './use-persistence.ts';

/** The list of what must be ready, always in the same places; what is missing is in ink with the act that mends it. */
export function GridItems({ touchClock }: { readonly touchClock: () => void }) {
  const { session } = useRunSettings();
  const { lastTap } = useStructure();
  const status = useSyncExternalStore(session.subscribe, session.status);
  const [facts, askAgain] = usePersistence();
  const wake = useWakeLock();
  const { pack, packDigest, practice, clockRate } = session.header;
  const storage = storageItem(facts, status.storage);
  return (
    <section className="grid-items" aria-label="grid check">
      <header className="grid-head">
        <h1>
          {pack.event.name}, car {pack.entry.number}
          <span className="quiet">{practice ? ` practice ${clockRate}×` : ` attempt ${pack.attempt.number}`}</span>
        </h1>
        <ThemeKey />
      </header>
      <ItemRow
        name="course"
        item={{ ready: true, words: `${pack.courseBook.name}, version ${pack.courseBook.version}, ${packDigest.slice(0, 8)}` }}
      />
      <ItemRow name="storage" item={storage} acts={storage.ready ? [] : [{ words: 'ask again', run: askAgain }]} />
      <ClockItem byTouch={touchClock} />
      <SensorItem />
      <ItemRow name="button" item={buttonItem(lastTap)} />
      <ItemRow name="screen" item={wakeItem(wake)} />
      <ItemRow name="address" item={{ ready: true, words: `${location.host} owns these journals` }} />
    </section>
  );
}
