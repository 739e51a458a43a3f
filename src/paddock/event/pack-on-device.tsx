import { useMutation } from '@tanstack/react-query';
import { Button, type ButtonKind } from '#src/components/button.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { useDevice } from '#src/paddock/device/device-storage.ts';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { useNow } from '#src/paddock/parts/use-now.ts';
import { relativeAge } from '#src/paddock/parts/when.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { type AttemptData, isStale } from './next-thing.ts';
import { packBytes, storePack } from './store-pack.ts';

/** The act of storing a pack; shared by the next thing to do and the attempt's own row. */
export function StorePackButton({
  attemptId,
  again,
  kind,
}: {
  readonly attemptId: string;
  readonly again: boolean;
  readonly kind: ButtonKind;
}) {
  const device = useDevice();
  const store = useMutation({
    mutationFn: async () => {
      if (device.state !== 'open')
        throw new Error(device.state === 'failed' ? device.message : 'The storage of this tablet is still opening.');
      const stored = await storePack(attemptId, device.storage.packs, Date.now());
      if (!stored.ok) throw new Error(stored.error.message);
    },
  });
  return (
    <div className="grid gap-3">
      <div>
        <Button kind={kind} busy={store.isPending} onClick={() => store.mutate()}>
          {again ? 'store the pack again' : 'store pack on this tablet'}
        </Button>
      </div>
      {store.isError ? <FailureNotice error={store.error} /> : null}
    </div>
  );
}

/** What is stored here: version, size, age; and a warning where it is out of date. */
export function PackOnDeviceWords({ attempt, pack }: { readonly attempt: AttemptData; readonly pack: StoredPack | null }) {
  const now = useNow();
  if (pack === null) return <span className="font-text text-quiet font-normal">not on this tablet</span>;
  return (
    <span className="grid justify-items-end">
      <span>
        {pack.digest.slice(0, 8)} · {(packBytes(pack) / 1000).toFixed(1)} kB
      </span>
      <span className="font-text text-quiet text-sm font-normal">stored {relativeAge(pack.storedMs, now)}</span>
      {isStale(attempt, pack) ? (
        <span className="font-text mt-1 block text-left font-normal">
          <FaultNotice>Changed since it was stored. Store it again, or type the changes on the grid.</FaultNotice>
        </span>
      ) : null}
    </span>
  );
}
