import { useState, useSyncExternalStore } from 'react';
import { attachSource, sourcesFor } from '#src/cockpit/attempt/sensor-choice.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import { sensorItem } from './grid-item.ts';
import { ItemRow } from './item-row.tsx';

/** The sensor and its live counts; one key for each source that the class permits and this device has. */
export function SensorItem() {
  const { session } = useRunSettings();
  const status = useSyncExternalStore(session.subscribe, session.status);
  const [trouble, setTrouble] = useState<string | null>(null);
  const item = sensorItem(status.sensor);
  const connect = async (name: (typeof sources)[number]['name']): Promise<void> => {
    const attached = await attachSource(session, name, true);
    setTrouble(attached.ok ? null : attached.error.message);
  };
  const sources = sourcesFor(session.header);
  // practice begins with the simulator, and may go over to what the car really has
  const offered = session.header.practice ? sources.filter(({ name }) => name !== status.sensor?.name) : item.ready ? [] : sources;
  const acts = session.role === 'reader' ? [] : offered.map(({ name, words }) => ({ words, run: () => void connect(name) }));
  const live = trouble !== null && !item.ready ? trouble : <LiveText of={() => sensorItem(session.status().sensor).words} />;
  return <ItemRow name="sensor" item={item} acts={acts} live={live} />;
}
