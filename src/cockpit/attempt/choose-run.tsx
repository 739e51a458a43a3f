import { goFullScreen } from '#src/cockpit/devices/full-screen.ts';
import { wakeSound } from '#src/cockpit/devices/tick.ts';
import { RunRow } from '#src/cockpit/finish/run-row.tsx';
import { Shell } from '#src/cockpit/shell.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import { UpdatePrompt } from '#src/components/update-prompt.tsx';
import type { JournalStore, StoredRunSummary } from '#src/storage/journal-store.ts';
import type { StoredPack } from '#src/storage/pack-store.ts';

export interface RunChoice {
  readonly practice: boolean;
  readonly clockRate: number;
}

interface ChooseRunProps {
  readonly stored: StoredPack;
  readonly runs: readonly StoredRunSummary[];
  readonly store: JournalStore;
  readonly trouble: string | null;
  readonly choose: (choice: RunChoice) => void;
}

const PRACTICE_RATES = [1, 10, 30] as const;

/** A run with the car's sensors, or practice by the simulator; what was recorded before stays below. */
export function ChooseRun({ stored, runs, store, trouble, choose }: ChooseRunProps) {
  const { event, entry, attempt, raceClass, car } = stored.pack;
  // The touch that opens the grid check is also the one that browsers want before full screen and sound.
  const begin = (choice: RunChoice): void => {
    wakeSound();
    void goFullScreen();
    choose(choice);
  };
  return (
    <Shell title={`${event.name}, car\u00a0${entry.number}`}>
      <UpdatePrompt />
      {trouble === null ? null : <FaultNotice>{trouble}</FaultNotice>}
      <p className="quiet">
        {raceClass.name}, attempt {attempt.number}, {car.name}
      </p>
      <div className="shell-keys">
        <button type="button" className="key key-main" onClick={() => begin({ practice: false, clockRate: 1 })}>
          grid check
        </button>
        {PRACTICE_RATES.map((clockRate) => (
          <button key={clockRate} type="button" className="key" onClick={() => begin({ practice: true, clockRate })}>
            practice {clockRate}×<span className="quiet">{clockRate === 1 ? 'you touch the places' : 'touched for you'}</span>
          </button>
        ))}
      </div>
      {runs.length === 0 ? null : (
        <section>
          <h2>recorded for this attempt</h2>
          {runs.map((run) => (
            <RunRow key={run.runId} run={run} store={store} />
          ))}
        </section>
      )}
      <p>
        <a href="/cockpit">all packs and runs</a>
      </p>
    </Shell>
  );
}
