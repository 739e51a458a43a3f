import { useState } from 'react';
import { formatSpeed, roundedDigits } from '#shared/course/format.ts';
import { type DistanceUnit, metresPer, metresPerSecondPer, type SpeedUnit } from '#shared/units.ts';
import { Choice } from '#src/cockpit/entry/choice.tsx';
import { Entry, type ReadBack } from '#src/cockpit/entry/entry.tsx';
import { decimalDigits, decimalText, type EntryField, meant } from '#src/cockpit/entry/entry-field.ts';
import { useRunSettings } from '#src/cockpit/run/run-context.ts';
import type { CourseNow } from '#src/run/run-session-contract.ts';

type Zone = CourseNow['zones'][number];
const NEW = 'new';

/** A limit that a bulletin changed or added: first which zone, then its speed and ends. */
export function LimitEntry({ done }: { readonly done: () => void }) {
  const { session, speedUnit, distanceUnit } = useRunSettings();
  const [chosen, setChosen] = useState<string | null>(null);
  const { zones, lengthM } = session.course();
  if (chosen === null) {
    const choices = zones.map((zone) => ({ id: zone.id, label: zone.name, value: `${formatSpeed(zone.limit, speedUnit)} ${speedUnit}` }));
    return (
      <Choice title="which limit?" choices={[...choices, { id: NEW, label: 'a new zone', value: '' }]} choose={setChosen} done={done} />
    );
  }
  const zone = zones.find((z) => z.id === chosen) ?? null;
  const readBack = (fields: readonly EntryField[]): ReadBack => {
    const [limit, from, to] = fields.map((field) => decimalText(meant(field)));
    if (limit == null || from == null || to == null || Number(limit) === 0)
      return { words: 'limit, where it begins and where it ends', act: null };
    if (Number(from) >= Number(to)) return { words: 'the zone must end after it begins', act: null };
    if (Number(from) * metresPer(distanceUnit) >= lengthM) return { words: 'the zone begins after the finish', act: null };
    const act = (): void =>
      void session.act({
        type: 'limit-set.v1',
        zone: zone?.id ?? crypto.randomUUID(),
        from: { text: from, unit: distanceUnit },
        to: { text: to, unit: distanceUnit },
        limit: { text: limit, unit: speedUnit },
      });
    return { words: `${limit} ${speedUnit} from ${from} to ${to} ${distanceUnit}`, act };
  };
  return <Entry title={zone?.name ?? 'a new zone'} fields={limitFields(zone, speedUnit, distanceUnit)} readBack={readBack} done={done} />;
}

function limitFields(zone: Zone | null, speedUnit: SpeedUnit, unit: DistanceUnit): readonly EntryField[] {
  const field = (id: string, label: string, u: string, present: string): EntryField => ({
    id,
    label,
    unit: u,
    kind: 'decimal',
    present,
    typed: '',
  });
  const at = (m: number | undefined): string => (m === undefined ? '' : decimalDigits(m / metresPer(unit), 3));
  return [
    field('limit', 'highest speed', speedUnit, zone === null ? '' : roundedDigits(zone.limit / metresPerSecondPer(speedUnit), 0)),
    field('from', 'from', unit, at(zone?.fromM)),
    field('to', 'to', unit, at(zone?.toM)),
  ];
}
