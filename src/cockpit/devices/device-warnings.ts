import { useSyncExternalStore } from 'react';
import { subscribeToWake, wakeState } from './wake-lock.ts';

/** What the device itself does wrong, in the warning line's words. */
export function useDeviceWarnings(): readonly string[] {
  const wake = useSyncExternalStore(subscribeToWake, wakeState);
  return wake === 'refused' || wake === 'unsupported' ? ['the screen may sleep'] : [];
}
