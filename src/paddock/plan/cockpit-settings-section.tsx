import { useMutation, useQueryClient } from '@tanstack/react-query';
import type { CockpitSettingsRequest } from '#shared/api/entries.ts';
import { setCockpitSettings } from '#src/api/entries/set-cockpit-settings.ts';
import { keys } from '#src/api/query-keys.ts';
import { FaultNotice } from '#src/components/notice.tsx';
import { isStale, type PlacedAttempt } from '#src/paddock/event/next-thing.ts';
import { StorePackButton } from '#src/paddock/event/pack-on-device.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { CockpitSettingsForm } from './cockpit-settings-form.tsx';

/** What the crew chooses for its engine and screen. It belongs to the entry, and reaches a car only with a newly stored pack. */
export function CockpitSettingsSection({ placed, stored }: { readonly placed: PlacedAttempt | null; readonly stored: StoredPack | null }) {
  const client = useQueryClient();
  const { user, team } = useSignedIn();
  const save = useMutation({
    mutationFn: ({ entryId, settings }: { readonly entryId: string; readonly settings: CockpitSettingsRequest }) =>
      setCockpitSettings(entryId, settings),
    onSuccess: () => client.invalidateQueries({ queryKey: keys.events(user.id, team.id) }),
  });
  const settings = placed?.entry.settings ?? null;
  if (placed === null || settings === null) return null;
  const { entry, attempt } = placed;
  const isOld = stored !== null && isStale(attempt, stored);
  return (
    <section aria-labelledby="cockpit-settings" className="mt-10 print:hidden">
      <h2 id="cockpit-settings" className="text-xl font-bold">
        Cockpit settings
      </h2>
      <p className="text-quiet mb-4">
        For every attempt of number {entry.number}.{entry.mayPrepare ? '' : ' The manager or the navigator may change them.'}
      </p>
      <fieldset disabled={!entry.mayPrepare} onChange={() => (save.isSuccess ? save.reset() : undefined)}>
        <CockpitSettingsForm
          settings={settings}
          busy={save.isPending}
          save={(values) => save.mutate({ entryId: entry.id, settings: values })}
        />
      </fieldset>
      <div className="mt-4 grid max-w-3xl gap-3">
        {save.isError ? <FailureNotice error={save.error} /> : null}
        {save.isSuccess ? <p role="status">{savedWords(stored, isOld)}</p> : null}
        {entry.mayPrepare && isOld ? (
          <FaultNotice act={<StorePackButton attemptId={attempt.id} again kind="main" />}>
            The pack on this tablet, and the plan above, are from before the last change. Store it again.
          </FaultNotice>
        ) : null}
      </div>
    </section>
  );
}

function savedWords(stored: StoredPack | null, isOld: boolean): string {
  if (isOld) return 'Saved. A tablet goes on with what it has until its pack is stored again.';
  if (stored === null) return 'Saved. The pack will carry them once it is stored on the tablet.';
  return 'Saved, and the pack on this tablet has them. Any other tablet needs its pack stored again.';
}
