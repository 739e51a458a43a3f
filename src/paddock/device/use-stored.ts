import { useEffect, useState } from 'react';
import type { OutboxRun } from '#src/storage/chunk-store.ts';
import type { StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { type DeviceStorage, useDevice } from './device-storage.ts';

/** What lies on this device, live: undefined until it is known. */
function useWatched<T>(read: (storage: DeviceStorage) => Promise<T>): T | undefined {
  const device = useDevice();
  const [value, setValue] = useState<T>();
  useEffect(() => {
    if (device.state !== 'open') return;
    return device.storage.watch(() => read(device.storage), setValue);
  }, [device, read]);
  return value;
}

const listPacks = ({ packs }: DeviceStorage) => packs.listPacks();
const listRuns = ({ journals }: DeviceStorage) => journals.listRuns();
const listPending = ({ chunks }: DeviceStorage) => chunks.pending();

export const usePacks = (): readonly StoredPack[] | undefined => useWatched(listPacks);
export const useLocalRuns = (): readonly StoredRunSummary[] | undefined => useWatched(listRuns);
/** Runs that still have something to do, with why a blocked one is blocked. */
export const usePendingRuns = (): readonly OutboxRun[] | undefined => useWatched(listPending);
