import { formatClock, formatDuration } from '#shared/course/format.ts';
import { instantOfClock } from '#src/cockpit/entry/clock-instant.ts';
import { Entry, type ReadBack } from '#src/cockpit/entry/entry.tsx';
import { clockSeconds, type EntryField, meant } from '#src/cockpit/entry/entry-field.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';

/** The release as the starter or a bulletin gives it, in the event's own zone; no signal needed. */
export function ReleaseEntry({ done }: { readonly done: () => void }) {
  const { session, timeZone } = useRunSettings();
  const readout = session.readout();
  const now = readout.official?.now ?? readout.release ?? session.header.createdMs;
  const field: EntryField = {
    id: 'release',
    label: `release, clock of ${timeZone}`,
    unit: '',
    kind: 'clock',
    present: readout.release === null ? '' : formatClock(readout.release, timeZone).replaceAll(':', ''),
    typed: '',
  };
  const readBack = (fields: readonly EntryField[]): ReadBack => {
    const wanted = fields[0] === undefined ? null : clockSeconds(meant(fields[0]));
    if (wanted === null) return { words: 'six digits: hours, minutes, seconds', act: null };
    const releaseMs = instantOfClock(wanted, now, timeZone);
    if (releaseMs === null) return { words: 'no clock shows this time today', act: null };
    return {
      words: releaseWords(releaseMs, readout.release, now, timeZone),
      act: () => void session.act({ type: 'release-set.v1', releaseMs }),
    };
  };
  return <Entry title="new release" fields={[field]} readBack={readBack} done={done} />;
}

/** `release 10:46:00, 3:30 later, in 5:12`. */
export function releaseWords(releaseMs: number, beforeMs: number | null, nowMs: number, timeZone: string): string {
  const moved = beforeMs === null ? 0 : releaseMs - beforeMs;
  const shift = moved === 0 ? '' : `, ${formatDuration(Math.abs(moved) / 1000)} ${moved > 0 ? 'later' : 'earlier'}`;
  const toGo = (releaseMs - nowMs) / 1000;
  const when = toGo > 0 ? `in ${formatDuration(Math.floor(toGo))}` : `${formatDuration(Math.floor(-toGo))} ago`;
  return `release ${formatClock(releaseMs, timeZone)}${shift}, ${when}`;
}
