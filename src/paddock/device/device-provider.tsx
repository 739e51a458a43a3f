import { useQueryClient } from '@tanstack/react-query';
import { type ReactNode, useEffect, useState } from 'react';
import { type OutboxHandle, startOutbox } from '#src/sync/start-outbox.ts';
import { DeviceContext, type DeviceState, type DeviceStorage } from './device-storage.ts';
import { openDevice } from './open-device.ts';
import { OutboxContext } from './outbox-context.ts';

/** Opens this device's storage and starts sending from this page. Where storage fails, the rest of the paddock goes on. */
export function DeviceProvider({ children }: { readonly children: ReactNode }) {
  const [device, setDevice] = useState<DeviceState>({ state: 'opening' });
  const [outbox, setOutbox] = useState<OutboxHandle | null>(null);
  useEffect(() => {
    let running: OutboxHandle | null = null;
    let left = false;
    openDevice().then(
      (storage) => {
        if (left) return;
        running = startOutbox(storage.chunks);
        setDevice({ state: 'open', storage });
        setOutbox(running);
      },
      (error: unknown) => setDevice({ state: 'failed', message: failureWords(error) }),
    );
    return () => {
      left = true;
      running?.stop();
    };
  }, []);
  return (
    <DeviceContext value={device}>
      <OutboxContext value={outbox}>
        {device.state === 'open' ? <RefreshWhenSent storage={device.storage} /> : null}
        {children}
      </OutboxContext>
    </DeviceContext>
  );
}

function failureWords(error: unknown): string {
  const detail = error instanceof Error ? ` (${error.message})` : '';
  return `The storage of this device cannot be opened${detail}. Close other windows of Evenline and reload.`;
}

/** A run that became safe, or whose sheet was derived, changes what the server answers. */
function RefreshWhenSent({ storage }: { readonly storage: DeviceStorage }) {
  const client = useQueryClient();
  useEffect(() => {
    let before: string | null = null;
    return storage.watch(
      () => storage.chunks.pending(),
      (pending) => {
        const now = pending.map(({ runId, progress }) => `${runId} ${progress.state}`).join();
        if (before !== null && before !== now) void client.invalidateQueries({ queryKey: ['user'] });
        before = now;
      },
    );
  }, [client, storage]);
  return null;
}
