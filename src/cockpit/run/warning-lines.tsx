import { useSyncExternalStore } from 'react';
import { useDeviceWarnings } from '#src/cockpit/devices/device-warnings.ts';
import { LiveText } from '#src/cockpit/live/live-text.tsx';
import { useStructure } from '#src/cockpit/live/use-live.ts';
import { noReturnWords, warningWords } from '#src/cockpit/view/words.ts';
import { Icon } from '#src/components/icon.tsx';
import { useRunSettings } from './run-context.ts';

/** What is wrong now, by the fault sign; at most two lines: the journal's before the engine's before the device's. Then time, by no sign. */
export function WarningLines() {
  const { session } = useRunSettings();
  const structure = useStructure();
  const device = useDeviceWarnings();
  const { storage } = useSyncExternalStore(session.subscribe, session.status);
  const journal = storage.state === 'failing' ? [storage.message ?? 'the journal cannot be written'] : [];
  const lines = [...journal, ...warningWords(structure), ...device].slice(0, 2);
  return (
    <>
      <div role="status">
        {lines.map((words) => (
          <p key={words} className="warning">
            <Icon name="fault" />
            <span>{words}</span>
          </p>
        ))}
      </div>
      {structure.noReturn === null ? null : (
        <p className="warning">
          <LiveText of={noReturnWords} />
        </p>
      )}
    </>
  );
}
