import { useState } from 'react';
import { formatDistance } from '#shared/course/format.ts';
import { metresPer } from '#shared/units.ts';
import { Choice } from '#src/cockpit/entry/choice.tsx';
import { Entry, type ReadBack } from '#src/cockpit/entry/entry.tsx';
import { decimalDigits, decimalText, type EntryField, meant } from '#src/cockpit/entry/entry-field.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import type { CourseNow } from '#src/run/run-session-contract.ts';

type Place = CourseNow['places'][number];

/** A start, a finish or another place that the officials moved: first which, then where. */
export function LineEntry({ done }: { readonly done: () => void }) {
  const { session, distanceUnit } = useRunSettings();
  const [place, setPlace] = useState<Place | null>(null);
  const course = session.course();
  if (place === null) {
    const choices = course.places.map((p) => ({
      id: p.checkpoint.id,
      label: p.checkpoint.name,
      value: `${formatDistance(p.atM, distanceUnit, 3)} ${distanceUnit}`,
    }));
    return (
      <Choice
        title="which line moved?"
        choices={choices}
        choose={(id) => setPlace(course.places.find((p) => p.checkpoint.id === id) ?? null)}
        done={done}
      />
    );
  }
  const field: EntryField = {
    id: 'at',
    label: `${place.checkpoint.name}, official distance`,
    unit: distanceUnit,
    kind: 'decimal',
    present: decimalDigits(place.atM / metresPer(distanceUnit), 3),
    typed: '',
  };
  const readBack = (fields: readonly EntryField[]): ReadBack => {
    const text = fields[0] === undefined ? null : decimalText(meant(fields[0]));
    if (text === null) return { words: 'its new official distance', act: null };
    return {
      words: lineWords(place, Number(text) * metresPer(distanceUnit)),
      act: () => void session.act({ type: 'line-moved.v1', checkpoint: place.checkpoint.id, to: { text, unit: distanceUnit } }),
    };
  };
  return <Entry title="line moved" fields={[field]} readBack={readBack} done={done} />;
}

function lineWords(place: Place, toM: number): string {
  const moved = Math.round(toM - place.atM);
  if (moved === 0) return `${place.checkpoint.name} stays where it is`;
  return `${place.checkpoint.name} ${Math.abs(moved)} m ${moved > 0 ? 'farther on' : 'nearer the start'}`;
}
