import { useEffect } from 'react';
import { formatClock } from '#shared/course/format.ts';
import { startOutboxLater } from '#src/cockpit/attempt/outbox-later.ts';
import { attemptPath } from '#src/cockpit/cockpit-path.ts';
import { RunRow } from '#src/cockpit/finish/run-row.tsx';
import { Shell } from '#src/cockpit/shell.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { UpdatePrompt } from '#src/components/update-prompt.tsx';
import type { JournalStore } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';
import { useStored } from './use-stored.ts';

/** What this tablet can run with no connection: open runs first, then packs, then what was recorded. */
export function PackList({ store }: { readonly store: JournalStore }) {
  const stored = useStored(store);
  useEffect(() => startOutboxLater(store), [store]);
  if (stored === undefined) return <Shell title="Cockpit">reading what is on this tablet</Shell>;
  const open = stored.runs.filter((run) => !run.ended);
  const ended = stored.runs.filter((run) => run.ended);
  return (
    <Shell title="Cockpit">
      <UpdatePrompt />
      {stored.warning === null ? null : <FaultNotice>{stored.warning}</FaultNotice>}
      {open.map((run) => (
        <RunRow key={run.runId} run={run} store={store} />
      ))}
      {stored.packs.length === 0 ? (
        <EmptyState
          act={
            <a className="key key-main" href="/">
              to the paddock
            </a>
          }
        >
          Packs stored on this tablet will stand here. Open the event in the paddock while there is a connection and store the pack of your
          attempt.
        </EmptyState>
      ) : (
        <section>
          <h2>packs on this tablet</h2>
          {stored.packs.map((pack) => (
            <PackRow key={pack.attemptId} stored={pack} />
          ))}
        </section>
      )}
      {ended.length === 0 ? null : (
        <section>
          <h2>recorded here</h2>
          {ended.map((run) => (
            <RunRow key={run.runId} run={run} store={store} />
          ))}
        </section>
      )}
      {stored.packs.length === 0 ? null : (
        <p>
          <a href="/">to the paddock</a>
        </p>
      )}
    </Shell>
  );
}

function PackRow({ stored }: { readonly stored: StoredPack }) {
  const { event, entry, attempt, raceClass } = stored.pack;
  const release = attempt.releaseMs === null ? 'release not known' : `release ${formatClock(attempt.releaseMs, event.timeZone)}`;
  return (
    <div className="shell-row">
      <span>
        <strong>
          {event.name}, car {entry.number}
        </strong>
        <span className="quiet">
          {raceClass.name}, attempt {attempt.number}, {release}
        </span>
      </span>
      <a className="key key-main" href={attemptPath(stored.attemptId)}>
        grid check
      </a>
    </div>
  );
}
