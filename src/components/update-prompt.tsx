import { useSyncExternalStore } from 'react';
import { acceptUpdate, subscribeToUpdate, updateState } from './app-update.ts';
import { Button } from './button.tsx';

const WORDS = {
  waiting: 'A newer Evenline is on this device.',
  'missing part': 'Part of this version is no longer on the server. Reload to go on with the newer one; nothing recorded is lost.',
  'held by a run': 'A run is open on this device. The newer Evenline waits until it has ended.',
} as const;

/** Stands in the paddock and in the cockpit's list of packs; never over a run. */
export function UpdatePrompt() {
  const state = useSyncExternalStore(subscribeToUpdate, updateState);
  if (state === 'none') return null;
  return (
    <div role="status" className="bg-pool flex flex-wrap items-center justify-between gap-3 p-3">
      <span>{WORDS[state]}</span>
      {state === 'held by a run' ? null : (
        <Button onClick={() => void acceptUpdate()}>{state === 'waiting' ? 'use it now' : 'reload'}</Button>
      )}
    </div>
  );
}
