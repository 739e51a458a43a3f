import { useState } from 'react';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { clockItem } from './grid-item.ts';
import { ItemRow } from './item-row.tsx';

/** The official clock: where it comes from, how sure it is, how long ago; and one more look at it now, or touches along it. */
export function ClockItem({ byTouch }: { readonly byTouch: () => void }) {
  const { session } = useRunSettings();
  const readout = useStructure();
  const [trouble, setTrouble] = useState<string | null>(null);
  const [busy, setBusy] = useState(false);
  const check = async (): Promise<void> => {
    setBusy(true);
    const checked = await session.checkClock();
    setTrouble(checked.ok ? null : checked.error.message);
    setBusy(false);
  };
  return (
    <ItemRow
      name="clock"
      item={clockItem(readout)}
      live={busy ? 'checking' : (trouble ?? <LiveText of={(now) => clockItem(now).words} />)}
      acts={
        session.role === 'reader'
          ? []
          : [
              { words: 'check now', run: () => void check() },
              { words: 'by touch', run: byTouch },
            ]
      }
    />
  );
}
