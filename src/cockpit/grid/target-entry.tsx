import { formatDuration, roundedDigits } from '#shared/course/format.ts';
import { metresPerSecondPer, type SpeedUnit } from '#shared/units.ts';
import { Entry, type ReadBack } from '#src/cockpit/entry/entry.tsx';
import { durationDigits, durationMs, type EntryField, meant } from '#src/cockpit/entry/entry-field.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';

/** The official target time as the class or a bulletin prints it. */
export function TargetEntry({ done }: { readonly done: () => void }) {
  const { session } = useRunSettings();
  const { targetTimeMs, lengthM } = session.course();
  const field: EntryField = {
    id: 'target',
    label: 'official target time',
    unit: '',
    kind: 'duration',
    present: durationDigits(targetTimeMs),
    typed: '',
  };
  const readBack = (fields: readonly EntryField[]): ReadBack => {
    const ms = fields[0] === undefined ? null : durationMs(meant(fields[0]));
    if (ms === null || ms === 0) return { words: 'hours, minutes, seconds; then thousandths if printed', act: null };
    return {
      words: `target ${formatDuration(ms / 1000, 3)}, average ${averageWords(lengthM, ms, session.header.pack.settings.speedUnit)}`,
      act: () => void session.act({ type: 'target-set.v1', targetTimeMs: ms }),
    };
  };
  return <Entry title="official target time" fields={[field]} readBack={readBack} done={done} />;
}

function averageWords(lengthM: number, ms: number, unit: SpeedUnit): string {
  return `${roundedDigits(lengthM / (ms / 1000) / metresPerSecondPer(unit), 2)} ${unit}`;
}
