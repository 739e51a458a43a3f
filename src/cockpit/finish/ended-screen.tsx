import { useEffect } from 'react';
import { formatDuration, formatTimeError } from '#shared/course/format.ts';
import type { RunSheet } from '#shared/pace/run-sheet.ts';
import { runSheet } from '#shared/pace/sheet.ts';
import { runSheetPath } from '#src/cockpit/cockpit-path.ts';
import { useStored } from '#src/cockpit/list/use-stored.ts';
import { Shell } from '#src/cockpit/shell.tsx';
import { JournalState } from '#src/components/journal-state.tsx';
import { sureText } from '#src/components/sure-text.ts';
import { UpdatePrompt } from '#src/components/update-prompt.tsx';
import type { RunSession } from '#src/run/run-session-contract.ts';
import type { JournalStore } from '#src/storage/journal-store.ts';
import { ExportKey } from './export-key.tsx';
import { journalFileName, saveText } from './export-run.ts';

const OUTCOME: Readonly<Record<RunSheet['outcome'], string>> = {
  open: 'open',
  finished: 'finished',
  rerun: 'ended for a rerun',
  void: 'void',
  retired: 'retired',
};

interface EndedProps {
  readonly session: RunSession;
  readonly store: JournalStore;
  readonly again: () => void;
}

/** The run is closed: what came out, and where its journal is. */
export function EndedScreen({ session, store, again }: EndedProps) {
  const stored = useStored(store);
  const sheet = session.derive(runSheet);
  const { runId, pack, practice } = session.header;
  const upload = stored?.runs.find((run) => run.runId === runId)?.upload ?? 'on this device';
  useEffect(() => {
    if (document.fullscreenElement !== null) void document.exitFullscreen();
  }, []);
  const save = async (): Promise<boolean> => {
    saveText(journalFileName(runId), await session.exportJournal());
    return true;
  };
  return (
    <Shell title={`${pack.event.name}, car\u00a0${pack.entry.number}`}>
      <UpdatePrompt />
      <p>
        {practice ? 'Practice' : `Attempt ${pack.attempt.number}`}, {OUTCOME[sheet.outcome]}.
      </p>
      {sheet.finish === null ? null : <OwnTime finish={sheet.finish} />}
      <div className="shell-row">
        <span>
          <strong>journal</strong>
          <span className="quiet">
            {sheet.observations} observations, <JournalState state={upload} />
          </span>
        </span>
        <ExportKey save={save} />
        <a className="key key-main" href={runSheetPath(runId)}>
          run sheet
        </a>
      </div>
      <div className="shell-row">
        <span>{afterwards(practice, sheet.outcome)}</span>
        <button type="button" className="key" onClick={again}>
          another run of this attempt
        </button>
      </div>
      <p>
        <a href="/cockpit">all packs and runs</a>
      </p>
    </Shell>
  );
}

function afterwards(practice: boolean, outcome: RunSheet['outcome']): string {
  if (practice) return 'Practice never counts; its journal is kept all the same.';
  if (outcome === 'finished') return 'Hot pressures next; the card time at stop control is the official one.';
  return 'What was recorded is kept; the race office says how the attempt goes on.';
}

function OwnTime({ finish }: { readonly finish: NonNullable<RunSheet['finish']> }) {
  const { magnitude, word } = formatTimeError(finish.timeErrorS, 2);
  return (
    <>
      <p className="shell-figure">
        {magnitude} <small>{word}</small>
      </p>
      <p>
        {formatDuration(finish.elapsedS, 2)}, {sureText(finish.sigmaS)}, own time, unofficial
      </p>
    </>
  );
}
