import { useQuery } from '@tanstack/react-query';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { useDevice } from '#src/paddock/device/device-storage.ts';
import type { LocalRun } from './derive-local.ts';

export interface LocalSheet {
  readonly run: LocalRun;
  readonly sheet: RunSheet;
}

/**
 * The run sheet of a run on this device, derived here and now. Null where this device does not hold the run. `grown` names
 * how far the journal has come, so that a run still being recorded is derived again when the page is opened again.
 */
export function useLocalSheet(runId: string, grown: number | undefined) {
  const device = useDevice();
  return useQuery<LocalSheet | null>({
    // Outside of any person's keys: a run on this device needs no sign-in, and is never kept in the offline cache.
    queryKey: ['device', 'run', runId, grown],
    enabled: device.state === 'open' && grown !== undefined,
    networkMode: 'always',
    staleTime: Number.POSITIVE_INFINITY,
    gcTime: 60_000,
    retry: false,
    queryFn: async () => {
      if (device.state !== 'open') return null;
      const { localSheet, readLocalRun } = await import('./derive-local.ts');
      const run = await readLocalRun(runId, device.storage.journals);
      if (!run.ok) throw new Error(run.error.message);
      return { run: run.value, sheet: localSheet(run.value) };
    },
  });
}
