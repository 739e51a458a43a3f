import { useMutation } from '@tanstack/react-query';
import { Button } from '#src/components/button.tsx';
import { useDevice } from '#src/paddock/device/device-storage.ts';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';

/** Gives out the journal on this device as a file. Needs no server and no sign-in. */
export function ExportJournalButton({ runId }: { readonly runId: string }) {
  const device = useDevice();
  const give = useMutation({
    networkMode: 'always',
    mutationFn: async () => {
      if (device.state !== 'open') throw new Error('The storage of this device is not open. Reload the page.');
      const { localNdjson, readLocalRun } = await import('./derive-local.ts');
      const run = await readLocalRun(runId, device.storage.journals);
      if (!run.ok) throw new Error(run.error.message);
      offerFile(`evenline-${runId}.ndjson`, localNdjson(run.value));
    },
  });
  return (
    <span className="grid gap-2">
      <Button busy={give.isPending} onClick={() => give.mutate()}>
        export journal
      </Button>
      {give.isError ? <FailureNotice error={give.error} /> : null}
    </span>
  );
}

function offerFile(name: string, text: string): void {
  const url = URL.createObjectURL(new Blob([text], { type: 'application/x-ndjson' }));
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  // The download has its own hold on the bytes once it began.
  setTimeout(() => URL.revokeObjectURL(url), 60_000);
}
