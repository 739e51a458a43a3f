import { useEffect, useSyncExternalStore } from 'react';
import { keepScreenOn, subscribeToWake, type WakeState, wakeState } from './wake-lock.ts';

export function useWakeLock(): WakeState {
  useEffect(keepScreenOn, []);
  return useSyncExternalStore(subscribeToWake, wakeState);
}
