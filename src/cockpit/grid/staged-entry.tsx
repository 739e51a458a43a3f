import { Entry, type ReadBack } from '#src/cockpit/entry/entry.tsx';
import { decimalDigits, decimalText, type EntryField, meant } from '#src/cockpit/entry/entry-field.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';

/** How far behind the start line the car stands: those metres are driven before the course begins. */
export function StagedEntry({ done }: { readonly done: () => void }) {
  const { session } = useRunSettings();
  const field: EntryField = {
    id: 'staged',
    label: 'car behind the start line',
    unit: 'm',
    kind: 'decimal',
    present: decimalDigits(session.course().stagedBehindM, 1),
    typed: '',
  };
  const readBack = (fields: readonly EntryField[]): ReadBack => {
    const text = fields[0] === undefined ? null : decimalText(meant(fields[0]));
    if (text === null) return { words: 'metres from the car’s nose to the line', act: null };
    return { words: `staged ${text} m behind the line`, act: () => void session.act({ type: 'staged-set.v1', behindM: Number(text) }) };
  };
  return <Entry title="staged" fields={[field]} readBack={readBack} done={done} />;
}
